import type { AuditFinding, FindingGrade, FindingKind, ShownVariant } from '@shared/audit';
import type { ProblemContent } from '@shared/problems';
import type { GivenValues } from '@shared/variants';
import type { ComputedKey } from '../key-value';

/** What an expression came to in one variant. */
export type AuditedOutcome =
  | {
      readonly key: ComputedKey;
      /** Digits to which two methods agree; undefined where one method applies. */
      readonly agreesTo?: number | undefined;
      readonly fault?: undefined;
    }
  | { readonly key?: undefined; readonly fault: string };

/** The key of a part under another course's convention. */
export interface OtherConvention {
  readonly kind: 'vacuum variance' | 'sign of squeezing' | 'splitter phase';
  /** For example `a vacuum variance of 1/4`. */
  readonly words: string;
  readonly key: AuditedOutcome | null;
}

/** A part in one variant; the key is null where the part has none. */
export interface AuditedPart {
  readonly key: AuditedOutcome | null;
  readonly slips: readonly AuditedOutcome[];
  /** Only in some variants. */
  readonly conventions?: readonly OtherConvention[];
}

/** One variant with all that the audit looks at. */
export interface AuditedVariant {
  readonly number: number | null;
  readonly givens: GivenValues;
  readonly parts: readonly AuditedPart[];
}

/** What an audit looks at: a problem and its variants, all computed before. */
export interface AuditInput {
  readonly content: Pick<ProblemContent, 'statement' | 'givens' | 'parts' | 'convention'>;
  /** Those in which every given has a value. */
  readonly variants: readonly AuditedVariant[];
  /** Those in which a derived given has none, and why. */
  readonly undrawn: readonly { readonly number: number | null; readonly givens: GivenValues; readonly why: string }[];
  /** How many variants the problem has. */
  readonly possible: number;
}

/** The variant as findings name it. */
export function shownVariant(variant: { number: number | null; givens: GivenValues } | undefined): ShownVariant | null {
  if (!variant) return null;
  const givens = Object.entries(variant.givens).map(
    ([name, { printed, unit }]) => `${name} = ${printed}${unit === undefined ? '' : ` ${unit}`}`,
  );
  return { number: variant.number, givens: givens.join(', ') };
}

/** `13 of 143 variants`, `all 143 variants`, `the only variant`. */
export function inVariants(count: number, of: number): string {
  if (of === 1) return 'the only variant';
  return count === of ? `all ${String(of)} variants` : `${String(count)} of ${String(of)} variants`;
}

/** A number as a finding prints it. */
export function inFigures(value: number, figures = 4): string {
  return String(Number(value.toPrecision(figures)));
}

/** Makes the findings of one part, or of the whole problem. */
export function findingsOf(input: AuditInput, part: number | null) {
  const of = input.variants.length;
  return {
    of,
    /**
     * A finding where some variant shows it; none otherwise.
     *
     * @param shows whether a variant shows it
     * @param say the sentence, given the first variant that shows it and `n of m variants`
     */
    over: (
      kind: FindingKind,
      grade: FindingGrade | ((count: number) => FindingGrade | null),
      shows: (variant: AuditedVariant, index: number) => boolean,
      say: (first: AuditedVariant, where: string) => string,
    ): AuditFinding[] => {
      const showing = input.variants.filter(shows);
      const [first] = showing;
      if (!first) return [];
      const graded = typeof grade === 'string' ? grade : grade(showing.length);
      if (graded === null) return [];
      const sentence = say(first, inVariants(showing.length, of));
      return [{ kind, grade: graded, part, sentence, variant: shownVariant(first), count: showing.length }];
    },
    /** A finding that no single variant shows. */
    whole: (kind: FindingKind, grade: FindingGrade, sentence: string, count = of): AuditFinding => {
      return { kind, grade, part, sentence, variant: null, count };
    },
  };
}
