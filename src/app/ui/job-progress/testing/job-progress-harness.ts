import { ComponentHarness } from '@angular/cdk/testing';

/** Speaks to an `app-job-progress` in tests. */
export class JobProgressHarness extends ComponentHarness {
  static readonly hostSelector = 'app-job-progress';

  private readonly cancelButton = this.locatorForOptional('button');
  private readonly bar = this.locatorForOptional('progress');
  private readonly lines = this.locatorForAll('p');

  /** Everything that can be read. */
  async text(): Promise<string> {
    const lines = await this.lines();
    return (await Promise.all(lines.map((line) => line.text()))).join(' ');
  }

  /** How far the line is drawn; null where there is none, or its end is not known. */
  async progress(): Promise<{ readonly done: number; readonly total: number } | null> {
    const bar = await this.bar();
    const [done, total] = [await bar?.getAttribute('value'), await bar?.getAttribute('max')];
    return done && total ? { done: Number(done), total: Number(total) } : null;
  }

  /** Cancels it. @throws Error where that cannot be done any more */
  async cancel(): Promise<void> {
    const button = await this.cancelButton();
    if (!button) throw new Error('There is nothing to cancel.');
    await button.click();
  }
}
