import axe from 'axe-core';
import type { Browser, Locator, Page } from 'playwright-core';

export interface WatchedPage {
  page: Page;
  /** What the console, the content policy and failing scripts said since the last call, with the address. */
  complaints: () => string[];
}

/** A page of a fresh browser profile that notes every complaint. */
export async function watchedPage(browser: Browser, url: string, width = 1440): Promise<WatchedPage> {
  const context = await browser.newContext({
    baseURL: url,
    viewport: { width, height: 900 },
    reducedMotion: 'reduce',
  });
  const page = await context.newPage();
  const found: string[] = [];
  const note = (text: string) => found.push(`${new URL(page.url()).pathname}: ${text}`);
  page.on('pageerror', (error) => note(error.message));
  page.on('console', (message) => {
    // Whoever is signed out, or away from the network, gets such lines from the browser itself.
    const ownWay = /status of 401|ERR_INTERNET_DISCONNECTED/.test(message.text());
    if (message.type() === 'error' && !ownWay) note(message.text().slice(0, 300));
  });
  await page.exposeFunction('noteViolation', (text: string) => note(text));
  await page.addInitScript(() => {
    document.addEventListener('securitypolicyviolation', (event) => {
      const { noteViolation } = window as unknown as { noteViolation: (text: string) => void };
      noteViolation(`${event.violatedDirective} ${event.blockedURI} ${event.sample} ${event.sourceFile}`);
    });
  });
  return { page, complaints: () => found.splice(0) };
}

/** Moves the focus with the keyboard alone, as far as this element. */
export async function tabTo(page: Page, target: Locator): Promise<void> {
  await target.waitFor();
  for (let steps = 0; steps < 120; steps += 1) {
    // The editor lives in a shadow root, which has a focus of its own.
    if (
      await target.evaluate(
        (element) => element === (element.getRootNode() as Document | ShadowRoot).activeElement,
      )
    )
      return;
    await page.keyboard.press('Tab');
  }
  throw new Error(`The keyboard does not reach ${target.toString()}.`);
}

interface Account {
  email: string;
  password: string;
}

/** Signs in through the page, with the keyboard only. */
export async function signInByKeyboard(page: Page, { email, password }: Account): Promise<void> {
  await page.goto('/sign-in');
  await tabTo(page, page.getByLabel('E-mail'));
  await page.keyboard.type(email);
  await tabTo(page, page.getByLabel('Password'));
  await page.keyboard.type(password);
  await page.keyboard.press('Enter');
  await page.waitForURL(({ pathname }) => !['/sign-in', '/'].includes(pathname));
  await settled(page);
}

/** Chooses the study to act in, where there is more than one. */
export async function chooseStudy(page: Page, study: string): Promise<void> {
  if (!page.url().endsWith('/choose')) return;
  await tabTo(page, page.getByRole('button', { name: new RegExp(`^Open\\s*${study} as`, 'i') }));
  await page.keyboard.press('Enter');
  await page.waitForURL(/\/now$/);
  await settled(page);
}

/** Waits until nothing is being fetched and no bars stand in place of content. */
export async function settled(page: Page): Promise<void> {
  await page.waitForLoadState('networkidle');
  await page.waitForFunction(() => document.querySelector('[aria-busy="true"]') === null);
}

/** Findings of axe by the success criteria of WCAG 2.2, levels A and AA. */
export async function axeFindings(page: Page): Promise<string[]> {
  await page.evaluate(axe.source);
  return page.evaluate(async () => {
    const { axe: inPage } = window as unknown as { axe: typeof axe };
    const { violations } = await inPage.run({
      runOnly: ['wcag2a', 'wcag2aa', 'wcag21aa', 'wcag22aa'],
      resultTypes: ['violations'],
    });
    return violations.map(
      ({ id, nodes }) =>
        `${id}: ${nodes
          .slice(0, 3)
          .map(({ html }) => html.slice(0, 160))
          .join(' | ')}`,
    );
  });
}

/** How far the page itself scrolls sideways; what scrolls inside its own frame does not count. */
export async function sidewaysScroll(page: Page): Promise<number> {
  const measure = () =>
    page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
  // A plot is drawn anew a moment after its frame has changed.
  for (let tries = 0; tries < 10 && (await measure()) > 0; tries += 1) await page.waitForTimeout(200);
  return measure();
}

/** What the elements are that stick out to the right, for the message. */
export const stickingOut = (page: Page): Promise<string[]> =>
  page.evaluate(() =>
    [...document.querySelectorAll('body *')]
      .filter((element) => element.getBoundingClientRect().right > document.documentElement.clientWidth + 1)
      .filter((element) => {
        for (let up = element.parentElement; up; up = up.parentElement)
          if (getComputedStyle(up).overflowX !== 'visible') return false;
        return true;
      })
      .slice(0, 4)
      .map((element) => element.outerHTML.slice(0, 120)),
  );
