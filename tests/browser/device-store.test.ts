import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import type { Browser, Page } from 'playwright-core';
import { build, preview, type PreviewServer } from 'vite';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { launchChromium } from '#tests/support/chromium.ts';

let outDir: string;
let server: PreviewServer;
let browser: Browser;
let page: Page;

beforeAll(async () => {
  outDir = await mkdtemp(join(tmpdir(), 'vesselry-device-store-'));
  const shared = {
    configFile: false as const,
    root: fileURLToPath(new URL('./device-store', import.meta.url)),
    logLevel: 'error' as const,
    build: { outDir, emptyOutDir: true },
  };
  await build(shared);
  server = await preview({ ...shared, preview: { port: 0, host: '127.0.0.1' } });
  browser = await launchChromium();
});
afterAll(async () => {
  await browser.close();
  await server.close();
  await rm(outDir, { recursive: true });
});
beforeEach(async () => {
  page = await (await browser.newContext()).newPage();
  await page.goto(server.resolvedUrls?.local[0] ?? '');
});

const place = {
  studyCode: 'SCREEPATH',
  entryId: 'entry-1',
  address: '/systolic/2',
  typedAt: '2026-03-14T09:05:00Z',
};
const operation = { pointer: '/systolic/2', value: 118.5, written: '118.50' };

// proves WS-13, DE-03
describe('the device store', () => {
  it('keeps changes across a closed page, and gives them back in the order typed', async () => {
    await page.evaluate(
      async ([change, what]) => {
        const store = await window.openStore('person-a', 1);
        await store.keep({ ...change, address: '/b', typedAt: '2026-03-14T09:06:00Z', operation: what });
        await store.keep({ ...change, operation: what });
      },
      [place, operation] as const,
    );
    await page.reload();
    const found = await page.evaluate(async () =>
      (await window.openStore('person-a', 1)).unsent<{ written: string }>('SCREEPATH', 'entry-1'),
    );
    expect(found.map(({ address }) => address)).toEqual(['/systolic/2', '/b']);
    expect(found[0]).toMatchObject({ operation, personId: 'person-a' });
  });

  it('replaces an older change at the same address, and forgets only what was acknowledged', async () => {
    const left = await page.evaluate(
      async ([change, what]) => {
        const store = await window.openStore('person-a', 1);
        const first = await store.keep({ ...change, operation: what });
        await store.keep({ ...change, operation: { ...what, written: '119.0' } });
        const other = await store.keep({ ...change, address: '/c', operation: what });
        await store.acknowledge([first, other]);
        return (await store.unsent<typeof what>()).map((kept) => kept.operation.written);
      },
      [place, operation] as const,
    );
    expect(left).toEqual(['119.0']);
  });

  it('shows the next person nothing: not the changes, not their number, not the bytes', async () => {
    const seen = await page.evaluate(
      async ([change, what]) => {
        await (await window.openStore('person-a', 1)).keep({ ...change, operation: what });
        const other = await window.openStore('person-b', 2);
        const thief = await window.openStore('person-a', 2);
        const refused = await thief.unsent().then(
          () => 'read',
          () => 'refused',
        );
        return { changes: await other.unsent(), count: await other.count(), refused };
      },
      [place, operation] as const,
    );
    expect(seen).toEqual({ changes: [], count: 0, refused: 'refused' });
    expect(await storedBytes(page)).not.toContain('118.50');
  });

  it('counts by study and entry, and wipes one person without the others', async () => {
    const counts = await page.evaluate(
      async ([change, what]) => {
        const [a, b] = [await window.openStore('person-a', 1), await window.openStore('person-b', 2)];
        await a.keep({ ...change, operation: what });
        await a.keep({ ...change, entryId: 'entry-2', operation: what });
        await a.keep({ ...change, studyCode: 'REEDGRIP', operation: what });
        await b.keep({ ...change, operation: what });
        const before = [await a.count(), await a.count('SCREEPATH'), await a.count('SCREEPATH', 'entry-2')];
        await a.wipe();
        return [...before, await a.count(), await b.count()];
      },
      [place, operation] as const,
    );
    expect(counts).toEqual([3, 2, 1, 0, 1]);
  });
});

/** Everything that lies in the database, as text. */
const storedBytes = (target: Page) =>
  target.evaluate(async () => {
    const request = indexedDB.open('vesselry-unsent');
    const database = await new Promise<IDBDatabase>((resolve) => {
      request.onsuccess = () => resolve(request.result);
    });
    const rows = database.transaction('unsent').objectStore('unsent').getAll();
    const found = await new Promise<{ content: { bytes: ArrayBuffer } }[]>((resolve) => {
      rows.onsuccess = () => resolve(rows.result as never);
    });
    return found
      .map(({ content, ...rest }) => JSON.stringify(rest) + new TextDecoder('latin1').decode(content.bytes))
      .join();
  });
