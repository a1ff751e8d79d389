import { ComponentHarness, type TestKey } from '@angular/cdk/testing';

/** Walks and reads a fringe strip as its users do. */
export class FringeStripHarness extends ComponentHarness {
  static readonly hostSelector = 'app-fringe-strip';

  private readonly list = this.locatorFor('[role="listbox"]');
  private readonly bars = this.locatorForAll('[role="option"]');
  private readonly patterns = this.locatorForAll('.pattern');
  private readonly flags = this.locatorForAll('.initials');

  /** What is read out for each bar, in order. */
  async getBars(): Promise<string[]> {
    return Promise.all((await this.bars()).map(async (bar) => (await bar.getAttribute('aria-label')) ?? ''));
  }

  /** What is read out for the bar that is visited. */
  async getVisited(): Promise<string | null> {
    const id = await (await this.list()).getAttribute('aria-activedescendant');
    for (const bar of await this.bars()) {
      if ((await bar.getAttribute('id')) === id) return bar.getAttribute('aria-label');
    }
    return null;
  }

  /** The names of the patterns with their tallies. */
  async getPatterns(): Promise<string[]> {
    return Promise.all(
      (await this.patterns()).map(async (pattern) => (await pattern.text()).replace(/\s+/g, ' ').trim()),
    );
  }

  /** The initials on the flags. */
  async getFlags(): Promise<string[]> {
    return Promise.all((await this.flags()).map(async (flag) => (await flag.text()).trim()));
  }

  /** Clicks the bracket of a pattern. */
  async choosePattern(name: string): Promise<void> {
    for (const pattern of await this.patterns()) {
      if ((await pattern.text()).startsWith(name)) return pattern.click();
    }
    throw new Error(`There is no pattern ${name}.`);
  }

  /** Sends keys to the strip. */
  async press(...keys: (string | TestKey)[]): Promise<void> {
    return (await this.list()).sendKeys(...keys);
  }
}
