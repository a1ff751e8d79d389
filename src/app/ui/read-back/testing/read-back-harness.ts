import { ComponentHarness } from '@angular/cdk/testing';

/** Reads a read-back and answers its question. */
export class ReadBackHarness extends ComponentHarness {
  static readonly hostSelector = 'app-read-back';

  private readonly lines = this.locatorForAll('.line');
  private readonly choices = this.locatorForAll('button');

  /** All its lines as one text. */
  async getText(): Promise<string> {
    const lines = await Promise.all((await this.lines()).map((line) => line.text({ exclude: 'mat-icon' })));
    return lines.map((line) => line.replace(/\s+/g, ' ').trim()).join(' / ');
  }

  /** The ways out of its question. */
  async getChoices(): Promise<string[]> {
    return Promise.all((await this.choices()).map((choice) => choice.text()));
  }

  async choose(label: string): Promise<void> {
    for (const choice of await this.choices()) if ((await choice.text()) === label) return choice.click();
    throw new Error(`${label} is not offered.`);
  }
}
