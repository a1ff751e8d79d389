import AxeBuilder from '@axe-core/playwright';
import { test as base, expect, type BrowserContext, type Page } from '@playwright/test';

/** What pages have said that they should not. */
interface ConsoleWatch {
  /**
   * Lets a message pass, in this test from now on: for pages that are made to meet a refusal, which browsers put on
   * the console as well.
   */
  allow(pattern: RegExp): void;
}

/**
 * Playwright's `test`, which also fails a test when any page of it, in whichever context, puts an error or a warning
 * on the console or throws: a broken content policy shows nowhere else.
 */
export const test = base.extend<{ consoleWatch: ConsoleWatch }>({
  consoleWatch: [
    async ({ browser }, use) => {
      const said: string[] = [];
      const allowed: RegExp[] = [];
      const watch = (context: BrowserContext): void => {
        context.on('console', (message) => {
          if (!['error', 'warning'].includes(message.type())) return;
          const { url } = message.location();
          said.push(`${message.type()}: ${message.text()} (${url || (message.page()?.url() ?? 'no page')})`);
        });
        context.on('weberror', (thrown) => {
          said.push(`thrown: ${String(thrown.error())} (${thrown.page()?.url() ?? 'no page'})`);
        });
      };
      for (const context of browser.contexts()) watch(context);
      browser.on('context', watch);
      await use({ allow: (pattern) => allowed.push(pattern) });
      browser.off('context', watch);
      expect(
        said.filter((line) => !allowed.some((pattern) => pattern.test(line))),
        'messages on the console',
      ).toEqual([]);
    },
    { auto: true },
  ],
});

/**
 * Expects that axe finds nothing on a page, once it stands still. Each finding names the rule and the elements.
 *
 * @param page what to look at
 * @param within only this part of it, a CSS selector
 */
export async function expectAccessible(page: Page, within?: string): Promise<void> {
  if (!within) {
    await expect(page.getByRole('heading', { level: 1 }).first()).toBeVisible();
    await expect(page.locator('[aria-busy="true"]')).toHaveCount(0);
  }
  const builder = new AxeBuilder({ page });
  const { violations } = await (within ? builder.include(within) : builder).analyze();
  expect(
    violations.map(({ id, help, nodes }) => ({ rule: `${id}: ${help}`, at: nodes.map(({ html }) => html) })),
    `axe on ${page.url()}`,
  ).toEqual([]);
}

export { expect };
export type { BrowserContext, Page };
