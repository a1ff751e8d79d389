import { ChangeDetectionStrategy, Component, computed, input } from '@angular/core';
import type { Verdict } from '@shared/problems';
import type { TryOut } from '@shared/try-outs';
import { textOfValue } from '../composer/present-value';

/** How a verdict is said, and in which tone. */
const words: Readonly<Record<Verdict, { readonly text: string; readonly tone: string }>> = {
  right: { text: 'right', tone: 'tone-right' },
  unit: { text: 'right but for the unit', tone: 'tone-slip' },
  'follow-through': { text: 'follows from an earlier answer', tone: 'tone-ft' },
  slip: { text: 'slip', tone: 'tone-slip' },
  wrong: { text: 'not the key', tone: 'tone-wrong' },
  unreadable: { text: 'not readable', tone: 'tone-wrong' },
  unanswered: { text: 'unanswered', tone: 'quiet' },
};

/** The answers of a try-out beside the keys of its variant. */
@Component({
  selector: 'app-try-out-answers',
  template: `
    <ul>
      @for (each of rows(); track each.label) {
        <li>
          <b>({{ each.label }})</b>
          <span class="mono answer">{{ each.answer || '–' }}</span>
          @if (each.key) {
            <span
              ><span class="quiet caption">key</span> <span class="mono">{{ each.key }}</span></span
            >
          }
          <span
            ><span [class]="each.tone">{{ each.verdict }}</span
            >{{ each.relation ? ': ' + each.relation : '' }}</span
          >
        </li>
      }
    </ul>
  `,
  styles: `
    ul {
      margin: 0;
      padding: 0;
      list-style: none;
    }

    li {
      display: flex;
      flex-wrap: wrap;
      align-items: baseline;
      gap: 0 12px;
      padding: 6px 0;
      overflow-wrap: anywhere;
    }

    li + li {
      border-top: var(--hair);
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class TryOutAnswers {
  readonly tryOut = input.required<TryOut>();

  protected readonly rows = computed(() =>
    this.tryOut().answers.map(({ label, answer, verdict, relation, key, unit }) => {
      const says = verdict === null ? { text: 'for a person to read', tone: 'quiet' } : words[verdict];
      const isPlain = verdict === null || verdict === 'right' || verdict === 'unanswered';
      return {
        label,
        answer,
        key: key === null ? '' : `${textOfValue(key, 6)}${unit ? ` ${unit}` : ''}`,
        verdict: says.text,
        tone: says.tone,
        relation: isPlain || relation === 'no known relation' ? '' : relation,
      };
    }),
  );
}
