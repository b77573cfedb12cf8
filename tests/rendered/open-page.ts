/** Opens a page from disk as a reviewer without a network does, and notes what it complains of or asks for. */
import type { Browser, Page } from 'playwright-core';

export interface OpenedPage {
  readonly page: Page;
  /** Messages of the console, errors, and requests for anything but the page itself. */
  readonly trouble: readonly string[];
}

export async function openPage(
  browser: Browser,
  path: string,
  width: number,
  height: number,
  javaScriptEnabled = true,
): Promise<OpenedPage> {
  const context = await browser.newContext({
    viewport: { width, height },
    offline: true,
    javaScriptEnabled,
  });
  const page = await context.newPage();
  const trouble: string[] = [];
  page.on('console', (message) => trouble.push(message.text()));
  page.on('pageerror', (error) => trouble.push(error.message));
  page.on('request', (request) => {
    if (!/^(data:|blob:|file:.*\.html$)/.test(request.url())) trouble.push(request.url());
  });
  await page.goto(`file://${path}`);
  return { page, trouble };
}
