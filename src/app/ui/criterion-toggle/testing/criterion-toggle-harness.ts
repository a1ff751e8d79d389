import { type BaseHarnessFilters, ComponentHarness, HarnessPredicate } from '@angular/cdk/testing';

interface CriterionToggleFilters extends BaseHarnessFilters {
  readonly name?: string | RegExp;
}

/** Reads and toggles a criterion. */
export class CriterionToggleHarness extends ComponentHarness {
  static readonly hostSelector = 'app-criterion-toggle';

  private readonly button = this.locatorFor('button');
  private readonly nameLabel = this.locatorFor('.name');
  private readonly words = this.locatorFor('.words');

  /** Finds the criterion of a name. */
  static with(options: CriterionToggleFilters = {}): HarnessPredicate<CriterionToggleHarness> {
    return new HarnessPredicate(CriterionToggleHarness, options).addOption('name', options.name, (harness, name) =>
      HarnessPredicate.stringMatches(harness.getName(), name),
    );
  }

  async getName(): Promise<string> {
    return (await this.nameLabel()).text();
  }

  async isAwarded(): Promise<boolean> {
    return (await (await this.button()).getAttribute('aria-pressed')) === 'true';
  }

  /** `awarded` or `not awarded`, as printed. */
  async getWords(): Promise<string> {
    return (await (await this.words()).text({ exclude: 'mat-icon' })).trim();
  }

  async toggle(): Promise<void> {
    return (await this.button()).click();
  }
}
