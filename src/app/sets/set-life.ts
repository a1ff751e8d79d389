import { type SetStage, setStageNames } from '@shared/primitives';
import type { SetSummary } from '@shared/sets';
import { dayOf, momentOf, spanOf } from '@shared/times';
import type { StageMark } from '../ui/stage-line/stage-line';

type Life = Pick<SetSummary, 'id' | 'courseId' | 'stage' | 'stages' | 'opensAt' | 'closesAt'>;

/** The stages of a set as its line shows them: when it entered each that it has reached, when the next ones are due. */
export function marksOf({ stage, stages, opensAt, closesAt }: Life, timeZone: string): StageMark[] {
  const present = setStageNames.indexOf(stage);
  return setStageNames.map((name, index) => {
    const entered = stages.filter((each) => each.stage === name).at(-1)?.at;
    const planned = name === 'open' ? opensAt : name === 'closed' ? closesAt : null;
    const at = index <= present ? entered : planned;
    return at == null ? { name } : { name, date: dayOf(at, timeZone) };
  });
}

/** The place of the present stage on the line. */
export function presentOf({ stage }: Pick<Life, 'stage'>): number {
  return setStageNames.indexOf(stage);
}

/** How far time has come towards the next stage: by the clock where a date is known, half-way where none is. */
export function progressOf({ stage, stages, opensAt, closesAt }: Life, now: number): number {
  const began = stages.at(-1)?.at;
  const next = stage === 'open' ? closesAt : stage === 'ready' ? opensAt : null;
  if (stage === 'archived') return 0;
  if (began === undefined || next === null || next <= began) return 0.5;
  return Math.min(0.96, Math.max(0.04, (now - began) / (next - began)));
}

/** What is to be done next with a set, in the words of its button. */
export interface NextAct {
  readonly label: string;
  readonly link: readonly string[];
  /** The stage that the page is to offer. */
  readonly move?: SetStage;
}

/** The one act that is next for a set. */
export function nextActOf({ id, courseId, stage }: Life): NextAct {
  const course = ['/courses', courseId];
  const page = [...course, 'sets', id];
  switch (stage) {
    case 'draft':
      return { label: 'Move to review', link: page, move: 'review' };
    case 'review':
      return { label: 'Make it ready', link: page, move: 'ready' };
    case 'ready':
      return { label: 'Open it now', link: page, move: 'open' };
    case 'open':
      return { label: 'See who has answered', link: page };
    case 'closed':
      return { label: 'Begin marking', link: page, move: 'marking' };
    case 'marking':
      return { label: 'Open the piles', link: [...course, 'marking'] };
    case 'moderation':
      return { label: 'Release', link: [...course, 'results', id, 'release'] };
    case 'released':
    case 'archived':
      return { label: 'See the results', link: [...course, 'results', id] };
  }
}

/** Where a set stands, in a sentence. */
export function standingOf(set: SetSummary, now: number, timeZone: string): string {
  const { students, opened, answered, handedIn } = set.counts;
  switch (set.stage) {
    case 'draft':
    case 'review':
      return set.problems === 0
        ? 'No problem yet.'
        : `${count(set.problems, 'problem')}, ${count(set.parts, 'part')}, ${count(set.marks, 'mark')}.`;
    case 'ready':
      return set.opensAt === null
        ? 'Waits to be opened by hand.'
        : `Opens by itself ${momentOf(set.opensAt, timeZone)}, in ${spanOf(set.opensAt - now)}.`;
    case 'open':
      return `${String(opened)} of ${count(students, 'sheet')} opened, ${String(answered)} with an answer, ${String(handedIn)} submitted.`;
    case 'closed':
    case 'marking':
    case 'moderation':
      return `${String(answered)} of ${count(students, 'script')} ${answered === 1 ? 'holds' : 'hold'} an answer.`;
    case 'released':
      return 'Students see their marks and feedback.';
    case 'archived':
      return 'Put away; students still see their feedback.';
  }
}

function count(n: number, word: string): string {
  return `${String(n)} ${n === 1 ? word : `${word}s`}`;
}
