/** How a key was computed, and how sure that is. */
export interface Agreement {
  /** The methods in words, for example `phase space` and `number basis`. */
  readonly methods: readonly string[];
  /** Decimal digits to which two methods agree; absent where one method applies. */
  readonly digits?: number | undefined;
  /** Whether the methods differ by more than they may. */
  readonly differs?: boolean | undefined;
  /** Of the number basis. */
  readonly dimension?: number | undefined;
  /** Bound on what lies outside that dimension. */
  readonly outsideWeight?: number | undefined;
  readonly milliseconds?: number | undefined;
}

/** The badge's few words. */
export function agreementInWords(agreement: Agreement): string {
  const { methods, digits, differs, dimension } = agreement;
  if (differs)
    return digits === undefined ? 'the methods differ' : `the methods differ from the ${ordinal(digits + 1)} digit on`;
  if (digits !== undefined && methods.length !== 1) {
    return `two methods agree to ${digits} ${digits === 1 ? 'digit' : 'digits'}`;
  }
  return ['one method', methods[0], dimension === undefined ? undefined : `dimension ${dimension}`]
    .filter((part) => part !== undefined && part !== '')
    .join(', ');
}

/** `1st`, `2nd`, `3rd`, `4th` … */
export function ordinal(n: number): string {
  const lastTwo = n % 100;
  if (lastTwo >= 11 && lastTwo <= 13) return `${n}th`;
  return `${n}${['th', 'st', 'nd', 'rd'][n % 10] ?? 'th'}`;
}
