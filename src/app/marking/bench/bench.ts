import {
  ChangeDetectionStrategy,
  Component,
  type ElementRef,
  computed,
  effect,
  inject,
  input,
  signal,
  untracked,
  viewChild,
  viewChildren,
} from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { secondOf, timeOf } from '@shared/times';
import type { PileAnswer } from '@shared/marking';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { PageTitle } from '../../core/page-title';
import { Session } from '../../core/session';
import { ErrorState } from '../../ui/error-state/error-state';
import type { FringeBar } from '../../ui/fringe-strip/fringe-bar';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { FringeStrip } from '../../ui/fringe-strip/fringe-strip';
import { MarkerToken } from '../../ui/marker-token/marker-token';
import type { RulerAnswer } from '../../ui/tolerance-ruler/tolerance-ruler';
import { CorrectPattern } from '../correction/correct-pattern';
import { Dock } from '../dock/dock';
import { AnswerCard, type CardPlace } from '../light-table/answer-card';
import { Rulings } from '../rulings/rulings';
import { BenchHand } from './bench-hand';
import { benchKeys, chooseSingleKeys, criterionKeys, singleKeysChosen, takesEnter, takesText } from './bench-keys';
import { BenchNotices } from './bench-notices';
import { HoldKeeper } from './hold-keeper';
import { PileWatch } from './pile-watch';

/** How long a walk over the patterns must rest before an answer is taken, in milliseconds. */
const walkRests = 300;

const cardPlaces: readonly CardPlace[] = ['in hand', 'next', 'after that'];

/** Where a pile is marked: the strip, the light table, the dock, and who is on the pile. Everything by keyboard. */
@Component({
  selector: 'app-bench',
  imports: [
    AnswerCard,
    CorrectPattern,
    Dock,
    ErrorState,
    FormulaText,
    FringeStrip,
    MarkerToken,
    MatButtonModule,
    RouterLink,
    Rulings,
  ],
  providers: [PileWatch, BenchHand, BenchNotices, HoldKeeper],
  templateUrl: './bench.html',
  styleUrl: './bench.scss',
  host: { '(document:keydown)': 'steer($event)' },
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class Bench {
  private readonly pageTitle = inject(PageTitle);
  private readonly session = inject(Session);
  protected readonly watch = inject(PileWatch);
  protected readonly hand = inject(BenchHand);
  private readonly strip = viewChild(FringeStrip);
  private readonly dock = viewChild(Dock);
  private readonly rulings = viewChild(Rulings);
  private readonly cards = viewChildren(AnswerCard);
  private readonly table = viewChild<ElementRef<HTMLElement>>('table');
  private readonly keySheet = viewChild<ElementRef<HTMLDialogElement>>('keySheet');

  private resting: ReturnType<typeof setTimeout> | undefined;

  readonly courseId = input.required<string>();
  readonly pileId = input.required<string>();

  protected readonly singleKeys = signal(singleKeysChosen());
  protected readonly visited = signal<string | null>(null);
  protected readonly pile = this.watch.pile;
  protected readonly timeZone = computed(() => this.session.course()?.timeZone ?? 'UTC');

  protected readonly heading = computed(() => {
    const pile = this.pile();
    return pile ? `Set ${String(pile.setNumber)}, problem ${String(pile.position)} (${pile.partLabel})` : 'Bench';
  });
  protected readonly subject = computed(() => {
    const pile = this.pile();
    return pile ? pile.heading || pile.problemTitle : '';
  });
  protected readonly marked = computed(() => this.count('marked'));
  protected readonly setAside = computed(() => this.count('set aside'));

  protected readonly groups = computed(() =>
    (this.pile()?.patterns ?? []).map(({ key, name }) => ({ key, name: shortName(name) })),
  );
  protected readonly bars = computed<readonly FringeBar[] | null>(() => {
    const pile = this.pile();
    if (!pile) return null;
    const team = this.watch.team();
    const inHand = this.hand.inHand();
    return pile.answers.map((answer) => ({
      id: answer.id,
      label: answer.code,
      group: answer.pattern,
      state: answer.state === 'waits' ? 'unmarked' : answer.state,
      height: answer.total,
      held: answer.id === inHand ? this.myHold() : holdOf(answer, pile.me, team),
    }));
  });
  protected readonly chosenGroup = computed(() => {
    const [first] = this.hand.shown();
    return first === undefined ? null : (this.watch.answers().get(first)?.pattern ?? null);
  });

  protected readonly chosenPattern = computed(() => this.watch.patterns().get(this.chosenGroup() ?? '') ?? null);
  /** The slips that the part has, as the answer in hand shows them. */
  protected readonly slipNames = computed(() => {
    const [first] = this.hand.shown();
    return (first === undefined ? [] : (this.hand.detail(first)?.slips ?? [])).map(({ name }) => name);
  });

  private readonly ratios = computed(
    () => (this.pile()?.answers ?? []).flatMap(({ ratio, pattern }) => (ratio === null ? [] : [{ ratio, pattern }])),
    // Marks come and go; the class's answers stay as they were checked.
    { equal: (one, other) => one.length === other.length && one.every((each, i) => each.ratio === other[i]?.ratio) },
  );
  private readonly ratiosByPattern = computed(() => {
    const ratios = this.ratios();
    const made = new Map<string, readonly RulerAnswer[]>();
    return (pattern: string): readonly RulerAnswer[] => {
      const before = made.get(pattern);
      if (before) return before;
      const now = ratios.map((each) => ({ value: each.ratio, chosen: each.pattern === pattern }));
      made.set(pattern, now);
      return now;
    };
  });

  protected readonly table3 = computed(() =>
    this.hand.shown().flatMap((id, index) => {
      const answer = this.watch.answers().get(id);
      if (!answer) return [];
      const pattern = this.watch.patterns().get(answer.pattern);
      return [
        {
          id,
          code: answer.code,
          detail: this.hand.detail(id),
          place: this.hand.looking() ? ('looked at' as const) : (cardPlaces[index] ?? 'after that'),
          number: this.watch.places().get(id) ?? 0,
          of: pattern?.total ?? 0,
          pattern: pattern?.name ?? '',
          ratios: this.ratiosByPattern()(answer.pattern),
          state: this.stateInWords(answer),
        },
      ];
    }),
  );

  protected readonly present = computed(() => {
    const pile = this.pile();
    if (!pile) return [];
    const inHand = this.hand.inHand();
    return [...pile.present]
      .map((each) => ({ ...each, mine: each.membershipId === pile.me }))
      .sort((one, other) => Number(one.mine) - Number(other.mine))
      .map((each) => {
        const answerId = each.mine ? inHand : each.answerId;
        const answer = answerId === null ? undefined : this.watch.answers().get(answerId);
        const pattern = answer && this.watch.patterns().get(answer.pattern);
        return { ...each, at: pattern ? shortName(pattern.name) : 'looking' };
      });
  });

  protected readonly notLive = computed(() => {
    const since = this.watch.notLiveSince();
    return since === null ? '' : `Not live since ${timeOf(since, this.timeZone())}`;
  });
  /** `live, saved 14:36:08`. */
  protected readonly liveInWords = computed(() => {
    const live = this.notLive() || (this.watch.isLive() ? 'live' : 'connecting');
    if (this.hand.isSaving()) return `${live}, saving`;
    const last = this.hand.lastSave();
    return last ? `${live}, saved ${secondOf(last.at, this.timeZone())}` : live;
  });
  protected readonly asideInWords = computed(() =>
    this.setAside() > 0 ? `, ${String(this.setAside())} set aside` : '',
  );

  protected readonly problem = computed(() => {
    const error = this.watch.problem();
    return error === null || this.pile() ? null : sentenceOf(error);
  });
  protected readonly requestId = computed(() => {
    const error = this.watch.problem();
    return error instanceof RequestFailure ? error.details.requestId : undefined;
  });

  protected readonly keyWords = computed(() => [
    ...(this.pile()?.criteria ?? []).map((criterion, index) => ({
      keys: [criterionKeys[index] ?? ''],
      does: `award ${criterion.name}, or take it back`,
      everywhere: false,
    })),
    ...benchKeys,
  ]);

  constructor() {
    effect(() => {
      const pileId = this.pileId();
      untracked(() => void this.open(pileId));
    });
    effect(() => {
      if (this.pile()) this.pageTitle.set(this.heading());
    });
  }

  protected async open(pileId: string): Promise<void> {
    await this.watch.open(pileId);
    if (this.pile()?.open) await this.hand.take();
  }

  protected chooseBar(answerId: string): void {
    this.visited.set(answerId);
    void this.hand.take({ answerId });
  }

  /** Goes to a pattern: its next free answer is visited at once, and taken in hand when the walk rests. */
  protected chooseGroup(pattern: string): void {
    clearTimeout(this.resting);
    const free = this.pile()?.answers.find(
      (answer) => answer.pattern === pattern && answer.state === 'waits' && (!answer.hold || this.isMine(answer)),
    );
    if (!free || pattern === this.chosenGroup()) return;
    this.visited.set(free.id);
    this.resting = setTimeout(() => void this.hand.take({ pattern }), walkRests);
  }

  protected setSingleKeys(on: boolean): void {
    this.singleKeys.set(on);
    chooseSingleKeys(on);
  }

  protected showKeys(): void {
    const sheet = this.keySheet()?.nativeElement;
    if (sheet?.open) sheet.close();
    else sheet?.showModal();
  }

  /** Every key of the bench. Single keys act outside text only, and not at all where they are switched off. */
  protected steer(event: KeyboardEvent): void {
    if (event.defaultPrevented || document.querySelector('dialog[open], .mat-mdc-menu-panel, mat-dialog-container'))
      return;
    if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) {
      event.preventDefault();
      this.saveFromKeyboard();
      return;
    }
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    if (event.key === 'Escape' && takesText(event.target)) {
      this.table()?.nativeElement.focus();
      return;
    }
    if (!this.singleKeys() || takesText(event.target) || event.repeat) {
      if (!(event.repeat && event.key.startsWith('Arrow') && this.singleKeys() && !takesText(event.target))) return;
    }
    if (event.key === 'Enter' && takesEnter(event.target)) return;
    const deed = this.deedOf(event.key);
    if (!deed) return;
    event.preventDefault();
    deed();
  }

  private deedOf(key: string): (() => void) | undefined {
    const criterion = this.pile()?.criteria[criterionKeys.indexOf(key as (typeof criterionKeys)[number])];
    if (criterion)
      return () => {
        this.hand.toggle(criterion.id);
      };
    const deeds: Readonly<Record<string, () => void>> = {
      Enter: () => {
        this.saveFromKeyboard();
      },
      m: () => this.dock()?.focusRemark(),
      x: () => this.dock()?.askAside(),
      r: () => this.rulings()?.ask(),
      p: () => this.dock()?.askPattern(),
      Z: () => this.dock()?.undoPattern(),
      z: () => {
        this.hand.undo();
      },
      t: () => {
        const id = this.visited();
        if (id) void this.hand.take({ answerId: id });
      },
      o: () => this.cards()[0]?.toggleLarge(),
      ',': () => this.cards()[0]?.turn(-1),
      '.': () => this.cards()[0]?.turn(1),
      '?': () => {
        this.showKeys();
      },
      ArrowLeft: () => this.strip()?.walk(-1),
      ArrowRight: () => this.strip()?.walk(1),
      '[': () => this.strip()?.walkGroups(-1),
      ']': () => this.strip()?.walkGroups(1),
    };
    return Object.hasOwn(deeds, key) ? deeds[key] : undefined;
  }

  private saveFromKeyboard(): void {
    // Away from the remark, so that single keys act on the next answer.
    if (this.hand.save()) this.table()?.nativeElement.focus({ preventScroll: true });
  }

  private isMine(answer: PileAnswer): boolean {
    return answer.hold?.holder === this.pile()?.me;
  }

  private count(state: PileAnswer['state']): number {
    return (this.pile()?.answers ?? []).filter((answer) => answer.state === state).length;
  }

  private myHold() {
    const pile = this.pile();
    const me = pile && this.watch.team().get(pile.me);
    return me ? { name: me.name, initials: me.initials, hue: me.hue, mine: true } : null;
  }

  private stateInWords(answer: PileAnswer): string {
    const name = (id: string) => this.watch.team().get(id)?.name ?? 'a colleague';
    if (answer.hold && answer.hold.holder !== this.pile()?.me) return `held by ${name(answer.hold.holder)}`;
    if (answer.state === 'marked')
      return answer.markerId === null ? 'stands by its check' : `marked by ${name(answer.markerId)}`;
    return answer.state === 'set aside' ? 'set aside for the lead' : 'only looked at';
  }
}

/** Who has an answer in hand; what is only kept ready shows no flag. */
function holdOf(
  answer: PileAnswer,
  me: string,
  team: ReadonlyMap<string, { name: string; initials: string; hue: number }>,
) {
  if (answer.hold?.kind !== 'in hand' || answer.hold.holder === me) return null;
  const holder = team.get(answer.hold.holder);
  return holder ? { name: holder.name, initials: holder.initials, hue: holder.hue, mine: false } : null;
}

/** A pattern's name up to its first comma: brackets are narrow, and what follows explains. */
function shortName(name: string): string {
  return name.split(',')[0] ?? name;
}
