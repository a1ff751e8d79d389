import { ComponentHarness } from '@angular/cdk/testing';

/** Reads a stage line as it is read out, and what is printed along it. */
export class StageLineHarness extends ComponentHarness {
  static readonly hostSelector = 'app-stage-line';

  private readonly drawing = this.locatorFor('svg');
  private readonly labels = this.locatorForAll('text');

  async getSentence(): Promise<string | null> {
    return (await this.drawing()).getAttribute('aria-label');
  }

  async getLabels(): Promise<string[]> {
    return Promise.all((await this.labels()).map((label) => label.text()));
  }
}
