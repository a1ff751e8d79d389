import type { AuditFinding, PartAudit } from '@shared/audit';
import { isComputed } from '@shared/answer-forms';
import { partLabel } from '@shared/problems';
import { inFigures, type AuditInput } from './audited';
import { keyFindings, sizesOf } from './key-findings';
import { roundingFindings } from './rounding-findings';
import { slipFindings } from './slip-findings';
import { problemFindings, statementFindings } from './statement-findings';

/**
 * Examines the keys, tolerances and slips of a problem over many variants that were computed before. Pure: it draws and
 * evaluates nothing.
 *
 * @returns what was found, what stops use first; and what is in order about each part
 */
export function auditKeys(input: AuditInput): {
  readonly findings: readonly AuditFinding[];
  readonly parts: readonly PartAudit[];
} {
  const findings = [
    ...problemFindings(input),
    ...input.content.parts.flatMap((_part, index) => [
      ...keyFindings(input, index),
      ...slipFindings(input, index),
      ...roundingFindings(input, index),
      ...statementFindings(input, index),
    ]),
  ];
  const ordered = [
    ...findings.filter(({ grade }) => grade === 'stops use'),
    ...findings.filter(({ grade }) => grade !== 'stops use'),
  ];
  return {
    findings: ordered,
    parts: input.content.parts.map((_part, part) => ({ part, inOrder: inOrder(input, part, findings) })),
  };
}

/** What was looked for in a part and not found, in a few sentences. */
function inOrder(input: AuditInput, index: number, findings: readonly AuditFinding[]): string {
  const answer = input.content.parts[index]?.answer;
  if (!answer || !isComputed(answer)) return 'Nothing is computed here, so there is no key to look at.';
  const has = (...kinds: AuditFinding['kind'][]) =>
    findings.some(({ part, kind }) => part === index && kinds.includes(kind));
  const sentences: string[] = [];
  if (!has('key without value', 'methods disagree', 'key of another kind', 'given without value')) {
    const sizes = sizesOf(input, index, answer);
    const [least, most] = [Math.min(...sizes), Math.max(...sizes)];
    if (sizes.length === 0) sentences.push('Keys have values in all variants.');
    else if (least === most) sentences.push(`Keys finite, ${inFigures(least)} throughout.`);
    else sentences.push(`Keys finite, in size from ${inFigures(least)} to ${inFigures(most)}.`);
  }
  const slips = answer.slips?.length ?? 0;
  if (slips > 0 && !has('slip equals key', 'slip inside tolerance', 'slips coincide'))
    sentences.push(
      slips === 1
        ? 'The slip keeps clear of the key.'
        : `The ${String(slips)} slips keep clear of the key and of each other.`,
    );
  if (!has('tolerance below rounding', 'relative tolerance at zero')) sentences.push('Honest rounding passes.');
  if (answer.form === 'number' && !has('answer in the statement'))
    sentences.push('The answer does not stand in the text.');
  return sentences.length > 0
    ? sentences.join(' ')
    : `Everything that was looked for in (${partLabel(index)}) is named above.`;
}
