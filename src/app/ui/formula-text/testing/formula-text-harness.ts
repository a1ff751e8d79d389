import { type BaseHarnessFilters, ComponentHarness, HarnessPredicate } from '@angular/cdk/testing';

/** Reads a formula text as a person would. */
export class FormulaTextHarness extends ComponentHarness {
  static readonly hostSelector = 'app-formula-text';

  private readonly formulas = this.locatorForAll('annotation[encoding="application/x-tex"]');
  private readonly links = this.locatorForAll('a');
  private readonly pictures = this.locatorForAll('img');
  private readonly paragraphs = this.locatorForAll('p');
  private readonly shownGivens = this.locatorForAll('.given-shown');

  /** Finds one among several. */
  static with(options: BaseHarnessFilters = {}): HarnessPredicate<FormulaTextHarness> {
    return new HarnessPredicate(FormulaTextHarness, options);
  }

  /** All characters. */
  async getText(): Promise<string> {
    return (await this.host()).text();
  }

  /** The TeX of its formulas, with what `\val` printed. */
  async getFormulas(): Promise<string[]> {
    return Promise.all((await this.formulas()).map((formula) => formula.text()));
  }

  async getParagraphs(): Promise<string[]> {
    return Promise.all((await this.paragraphs()).map((paragraph) => paragraph.text()));
  }

  async getLinkAddresses(): Promise<(string | null)[]> {
    return Promise.all((await this.links()).map((link) => link.getAttribute('href')));
  }

  async getPictureAddresses(): Promise<(string | null)[]> {
    return Promise.all((await this.pictures()).map((picture) => picture.getAttribute('src')));
  }

  /** How many printed givens are underlined. */
  async countShownGivens(): Promise<number> {
    return (await this.shownGivens()).length;
  }
}
