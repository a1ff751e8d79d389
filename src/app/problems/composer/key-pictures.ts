import { ChangeDetectionStrategy, Component, computed, inject, input, linkedSignal, signal } from '@angular/core';
import { takeUntilDestroyed, toObservable } from '@angular/core/rxjs-interop';
import { catchError, debounceTime, distinctUntilChanged, map, of, switchMap } from 'rxjs';
import type { StatePicture } from '@shared/key-picture';
import type { DraftPart } from '@shared/problem-draft';
import type { SampledVariant } from '@shared/problem-routes';
import { partLabel } from '@shared/problems';
import { printNumber } from '@shared/reading/print';
import { readTypedNumber } from '@shared/typed-number';
import { ProblemsApi } from '../../core/api/problems-api';
import { sentenceOf } from '../../core/api/request-failure';
import { AmplitudePath } from '../../ui/amplitude-path/amplitude-path';
import { ProbabilityBars } from '../../ui/probability-bars/probability-bars';
import { WignerMap } from '../../ui/wigner-map/wigner-map';
import type { KeyNames } from './key-language';
import { OpenProblem } from './open-problem';
import { valued } from './present-value';
import { SampleVariants } from './sample-variants';

/** What happens to an amplitude, in words. */
const passageWords: Readonly<Record<string, string>> = {
  damp: 'damped',
  amplify: 'amplified',
  invert: 'inverted',
  lose: 'with losses',
};

/** Pictures of the state that a key asks about, in the variant that is shown: P(n), Wigner function, path of the amplitude. */
@Component({
  selector: 'app-key-pictures',
  imports: [AmplitudePath, ProbabilityBars, WignerMap],
  templateUrl: './key-pictures.html',
  styleUrl: './key-pictures.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class KeyPictures {
  private readonly api = inject(ProblemsApi);
  private readonly open = inject(OpenProblem);
  private readonly samples = inject(SampleVariants);

  readonly index = input.required<number>();
  readonly part = input.required<DraftPart>();
  readonly names = input.required<KeyNames>();

  protected readonly label = computed(() => partLabel(this.index()));
  protected readonly modes = [1, 2] as const;
  protected readonly mode = linkedSignal<string, 1 | 2>({ source: () => this.part().id, computation: () => 1 });
  private readonly drawn = signal<{ readonly partId: string; readonly picture: StatePicture | null } | null>(null);
  protected readonly why = signal('');

  /** Whether the key names anything that makes or asks of a state: only then is there room for pictures. */
  protected readonly isOfState = computed(() => {
    const { form, key } = this.part().answer;
    if (form === 'choice' || form === 'worked') return false;
    const called = new Set([...key.matchAll(/([A-Za-z]\w*)\s*\(/g)].map((match) => match[1] ?? ''));
    return this.names().functions.some(({ name, makes }) => makes === 'state' && called.has(name));
  });

  /** The latest picture of this part; it stays while the next one is drawn. */
  protected readonly picture = computed(() => {
    const drawn = this.drawn();
    return drawn?.partId === this.part().id ? drawn.picture : null;
  });

  protected readonly caption = computed(() => {
    const number = this.samples.shown()?.number;
    const mean = this.picture()?.mean;
    const words = [
      ...(number == null ? [] : [`variant ${String(number)}`]),
      ...(mean === undefined ? [] : [`mean ${printNumber(mean, 3)}`]),
    ];
    return words.join(', ');
  });
  protected readonly where = computed(() => {
    const picture = this.picture();
    return picture?.modes === 2 ? `of mode ${String(picture.mode)}` : '';
  });
  protected readonly passages = computed(() => {
    const passages = this.picture()?.path?.passages ?? [];
    return [...new Set(passages.map((each) => passageWords[each] ?? each))].join(', ');
  });
  protected readonly wignerCaption = computed(() => {
    const wigner = this.picture()?.wigner;
    if (!wigner) return '';
    const isNegative = wigner.least < -1e-6 * wigner.scale;
    return isNegative
      ? `from ${printNumber(wigner.least, 3)} to ${printNumber(wigner.most, 3)}`
      : `at most ${printNumber(wigner.most, 3)}, nowhere negative`;
  });

  constructor() {
    const request = computed(() => {
      const draft = this.open.draft();
      const variant = this.samples.shown();
      const expression = this.part().answer.key.trim();
      if (!draft || !variant || expression === '' || !this.isOfState()) return null;
      return {
        partId: this.part().id,
        body: {
          expression,
          givens: { ...variant.givens, ...this.middles() },
          earlier: earlierValues(variant, this.index()),
          convention: draft.convention,
          mode: this.mode(),
        },
      };
    });
    toObservable(request)
      .pipe(
        distinctUntilChanged((one, other) => JSON.stringify(one) === JSON.stringify(other)),
        debounceTime(350),
        switchMap((each) => {
          if (!each) return of(null);
          return this.api.keyPicture(each.body).pipe(
            map(({ picture, why }) => ({ partId: each.partId, picture, why })),
            catchError((error: unknown) => of({ partId: each.partId, picture: null, why: sentenceOf(error) })),
          );
        }),
        takeUntilDestroyed(),
      )
      .subscribe((result) => {
        this.why.set(result?.why ?? '');
        // A key that fails while it is typed leaves the picture of a moment ago.
        if (result && (result.picture || this.drawn()?.partId !== result.partId)) this.drawn.set(result);
      });
  }

  /** A formula is drawn with its variables in the middle of their ranges. */
  private middles(): SampledVariant['givens'] {
    const { form, variables } = this.part().answer;
    if (form !== 'formula') return {};
    return Object.fromEntries(
      variables.flatMap(({ name, low, high, integers }) => {
        const [from, to] = [readTypedNumber(low), readTypedNumber(high)];
        if (name.trim() === '' || from === undefined || to === undefined) return [];
        const middle = (from + to) / 2;
        const value = integers ? Math.round(middle) : middle;
        return [[name.trim(), { value, printed: String(value) }]];
      }),
    );
  }
}

/** The values of earlier parts that an expression can name. */
function earlierValues(variant: SampledVariant, index: number) {
  return Object.fromEntries(
    variant.parts.slice(0, index).flatMap((part, place) => {
      const key = valued(part.key);
      if (!key || key.typeset !== undefined) return [];
      const value = typeof key.value === 'number' && key.unit ? `${String(key.value)} ${key.unit}` : key.value;
      return [[`part_${partLabel(place)}`, value]];
    }),
  );
}
