import { type BaseHarnessFilters, ComponentHarness, HarnessPredicate } from '@angular/cdk/testing';
import { ReadBackHarness } from '../../read-back/testing/read-back-harness';

interface AnswerFieldFilters extends BaseHarnessFilters {
  readonly label?: string | RegExp;
}

/** Types into an answer field and reads what stands beneath. */
export class AnswerFieldHarness extends ComponentHarness {
  static readonly hostSelector = 'app-answer-field';

  private readonly input = this.locatorFor('input');
  private readonly hint = this.locatorFor('.hint');
  private readonly readBack = this.locatorFor(ReadBackHarness);

  /** Finds the field with a label. */
  static with(options: AnswerFieldFilters = {}): HarnessPredicate<AnswerFieldHarness> {
    return new HarnessPredicate(AnswerFieldHarness, options).addOption('label', options.label, (harness, label) =>
      HarnessPredicate.stringMatches(harness.getLabel(), label),
    );
  }

  async getLabel(): Promise<string | null> {
    return (await this.input()).getAttribute('aria-label');
  }

  async getHint(): Promise<string> {
    return (await this.hint()).text();
  }

  async getValue(): Promise<string> {
    return (await this.input()).getProperty<string>('value');
  }

  /** Replaces what stands in the field. */
  async type(text: string): Promise<void> {
    const input = await this.input();
    await input.clear();
    await input.sendKeys(text);
  }

  async getReadBack(): Promise<ReadBackHarness> {
    return this.readBack();
  }
}
