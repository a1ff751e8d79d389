import { numberAttribute } from '@angular/core';

/** Transforms for inputs that come from the address, where what is missing arrives as undefined. */
export const address = {
  /** Text; empty where it is missing. */
  text: (value: string | undefined): string => value ?? '',
  /** A page number from 1. */
  page: (value: unknown): number => Math.max(1, Math.trunc(numberAttribute(value, 1))),
} as const;
