import { ComponentHarness } from '@angular/cdk/testing';

/** Reads a tolerance ruler. */
export class ToleranceRulerHarness extends ComponentHarness {
  static readonly hostSelector = 'app-tolerance-ruler';

  private readonly drawing = this.locatorFor('svg');
  private readonly ticks = this.locatorForAll('text.tick');
  private readonly dots = this.locatorForAll('circle.dot');
  private readonly slips = this.locatorForAll('text.slip-name');

  /** What is read out. */
  async getSentence(): Promise<string | null> {
    return (await this.drawing()).getAttribute('aria-label');
  }

  async getTicks(): Promise<string[]> {
    return Promise.all((await this.ticks()).map((tick) => tick.text()));
  }

  /** The names of slips that found room. */
  async getSlipNames(): Promise<string[]> {
    return Promise.all((await this.slips()).map((slip) => slip.text()));
  }

  async countDots(): Promise<number> {
    return (await this.dots()).length;
  }
}
