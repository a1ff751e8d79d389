import { ComponentHarness } from '@angular/cdk/testing';

/** Reads an agreement badge and opens it. */
export class AgreementBadgeHarness extends ComponentHarness {
  static readonly hostSelector = 'app-agreement-badge';

  private readonly badge = this.locatorFor('.badge');
  private readonly details = this.documentRootLocatorFactory().locatorForOptional('[role="dialog"]');

  async getText(): Promise<string> {
    return (await (await this.badge()).text()).trim();
  }

  /** Opens or closes the details. */
  async toggle(): Promise<void> {
    return (await this.badge()).click();
  }

  /** What the open details say; null where they are closed. */
  async getDetails(): Promise<string | null> {
    return (await this.details())?.text() ?? null;
  }
}
