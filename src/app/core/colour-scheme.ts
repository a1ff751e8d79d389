import { DOCUMENT, Injectable, inject, signal } from '@angular/core';

/** What a person can choose: as the device has it, or always one of both. */
export const colourSchemes = ['as the device', 'light', 'dark'] as const;
export type ColourSchemeChoice = (typeof colourSchemes)[number];

const storageKey = 'halfsilver.scheme';

/** Light or dark; kept in this browser. */
@Injectable({ providedIn: 'root' })
export class ColourScheme {
  private readonly root = inject(DOCUMENT).documentElement;
  private readonly chosen = signal<ColourSchemeChoice>('as the device');

  readonly choice = this.chosen.asReadonly();

  constructor() {
    const kept = localStorage.getItem(storageKey);
    this.choose(colourSchemes.find((each) => each === kept) ?? 'as the device');
  }

  choose(choice: ColourSchemeChoice): void {
    this.chosen.set(choice);
    localStorage.setItem(storageKey, choice);
    if (choice === 'as the device') this.root.removeAttribute('data-theme');
    else this.root.setAttribute('data-theme', choice);
  }
}
