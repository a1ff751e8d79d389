/** The keys of the criteria, in the order of the mark scheme: where the left hand lies, then the row above. */
export const criterionKeys = ['a', 's', 'd', 'f', 'g', 'h', 'j', 'k', 'l', 'q', 'w', 'e'] as const;

/** A key and what it does, as the sheet of keys prints it. */
export interface KeyWords {
  readonly keys: readonly string[];
  readonly does: string;
  /** Whether it acts in text fields too, and cannot be switched off. */
  readonly everywhere?: boolean;
}

/** The keys of the bench besides those of the criteria. */
export const benchKeys: readonly KeyWords[] = [
  { keys: ['Ctrl', 'Enter'], does: 'save and take next, from anywhere', everywhere: true },
  { keys: ['Enter'], does: 'save and take next' },
  { keys: ['m'], does: 'write the remark; Escape leaves it' },
  { keys: ['x'], does: 'set aside' },
  { keys: ['r'], does: 'ask for a ruling about the answer in hand' },
  { keys: ['p'], does: 'apply to the pattern; a preview shows first' },
  { keys: ['z'], does: 'undo the last save' },
  { keys: ['Shift', 'z'], does: 'undo the last marks of a pattern' },
  { keys: ['←', '→'], does: 'walk the strip' },
  { keys: ['[', ']'], does: 'go to the pattern before or after' },
  { keys: ['t'], does: 'take the visited answer in hand' },
  { keys: ['o'], does: 'show the worked page large' },
  { keys: [',', '.'], does: 'turn the worked pages' },
  { keys: ['?'], does: 'show these keys' },
];

const place = 'halfsilver bench single keys';

/** Whether single keys act, as was last chosen in this browser. */
export function singleKeysChosen(): boolean {
  return localStorage.getItem(place) !== 'off';
}

/** Remembers whether single keys act. */
export function chooseSingleKeys(on: boolean): void {
  localStorage.setItem(place, on ? 'on' : 'off');
}

/** Whether typing goes into something that takes text, or a choice, so that single keys must not act. */
export function takesText(target: EventTarget | null): boolean {
  return target instanceof HTMLElement && target.closest('input, textarea, select, [contenteditable="true"]') !== null;
}

/** Whether Enter already means something where the focus is. */
export function takesEnter(target: EventTarget | null): boolean {
  return (
    takesText(target) ||
    (target instanceof Element && target.closest('button, a, summary, [role="listbox"], [role="menuitem"]') !== null)
  );
}
