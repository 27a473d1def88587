import { mkdir } from 'node:fs/promises';
import { join } from 'node:path';
import type { Page } from 'playwright-core';
import { axeFindings, settled, sidewaysScroll, stickingOut, type WatchedPage } from './browser-page.ts';

const folder = join(import.meta.dirname, '../../docs/screenshots');

/** A page that says it has nothing, is not for this role, or broke. */
const dead =
  /This address leads nowhere|Your role does not open this|There is nothing here|Something went wrong/;

/** What is wrong with the open page at the widths of a desk, a tablet and, for reflow, 320 px; pictures where asked. */
export async function judge({ page, complaints }: WatchedPage, picture?: string): Promise<string[]> {
  await settled(page);
  const place = new URL(page.url()).pathname;
  const wrong: string[] = [];
  const text = await page.getByRole('main').innerText();
  const words = dead.exec(text);
  if (words !== null || text.trim().length < 20) wrong.push(`nothing there: ${words?.[0] ?? text}`);
  for (const width of [1440, 768]) {
    await page.setViewportSize({ width, height: 900 });
    await settled(page);
    wrong.push(...(await axeFindings(page)).map((finding) => `${width} px, ${finding}`));
    if ((await sidewaysScroll(page)) > 0)
      wrong.push(`${width} px scrolls: ${(await stickingOut(page)).join(' ')}`);
    if (picture !== undefined) await takePicture(page, `${picture}-${width}`);
  }
  await page.setViewportSize({ width: 320, height: 640 });
  await settled(page);
  if ((await sidewaysScroll(page)) > 0) wrong.push(`320 px scrolls: ${(await stickingOut(page)).join(' ')}`);
  await page.setViewportSize({ width: 1440, height: 900 });
  return [...wrong.map((what) => `${place} ${what}`), ...complaints()];
}

/** Saves a picture for the documents; only where SCREENSHOTS=1, so that a test run leaves the tree as it was. */
export async function takePicture(page: Page, name: string): Promise<void> {
  if (process.env['SCREENSHOTS'] !== '1') return;
  await mkdir(folder, { recursive: true });
  await page.evaluate(() => window.scrollTo(0, 0));
  await page.screenshot({ path: join(folder, `${name}.png`) });
}

/** The addresses of the tabs that this role has. */
export const tabsOf = (page: Page, label: string): Promise<string[]> =>
  page
    .getByRole('navigation', { name: label, exact: true })
    .getByRole('link')
    .evaluateAll((links) => links.map((link) => link.getAttribute('href') ?? ''));

/** The first link of the open page that leads one step deeper. */
export const deeperFrom = (page: Page, tab: string): Promise<string | undefined> =>
  page
    .getByRole('main')
    .getByRole('link')
    .evaluateAll(
      (links, below) =>
        links.map((link) => link.getAttribute('href') ?? '').find((href) => href.startsWith(`${below}/`)),
      tab,
    );
