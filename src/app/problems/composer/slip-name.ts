import type { DraftAnswer } from '@shared/problem-draft';

/** A slip by its name, or by its place where it has none yet. */
export function slipName(slips: DraftAnswer['slips'], index: number): string {
  const name = slips[index]?.name.trim() ?? '';
  return name === '' ? `slip ${String(index + 1)}` : name;
}
