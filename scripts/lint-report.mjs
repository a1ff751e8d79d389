import { relative } from 'node:path';

/**
 * @typedef {{ readonly ruleId: string | null, readonly line?: number, readonly column?: number,
 *   readonly message: string }} LintMessage
 */

/**
 * Splits a report of ESLint's `json` format into what breaks the direction of imports and the rest, a line each.
 * Warnings count like errors: what need not be followed is not a rule here.
 *
 * @param {readonly { readonly filePath: string, readonly messages: readonly LintMessage[] }[]} report
 * @param {string} root
 * @returns {{ readonly directions: string, readonly others: string }} empty where there is nothing
 */
export function splitLint(report, root) {
  const lines = report.flatMap(({ filePath, messages }) =>
    messages.map(({ ruleId, line = 0, column = 0, message }) => ({
      isDirection: ruleId?.startsWith('boundaries/') ?? false,
      text: `${relative(root, filePath)}:${String(line)}:${String(column)} ${message} (${ruleId ?? 'cannot be read'})`,
    })),
  );
  const join = (/** @type {boolean} */ directions) =>
    lines
      .filter(({ isDirection }) => isDirection === directions)
      .map(({ text }) => text)
      .join('\n');
  return { directions: join(true), others: join(false) };
}
