import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import type { CDPSession, Page } from 'playwright-core';
import { build, preview } from 'vite';
import { launchChromium } from '../support/chromium.ts';

/**
 * What one key costs in a form of 400 fields, in script time of the page's main thread (Chromium, Performance domain):
 * the product's form against the form library alone. Prints; asserts nothing, because the machine decides.
 *
 * `node --import tsx tests/benchmarks/form-typing.ts`
 */
async function main(): Promise<void> {
  const outDir = await mkdtemp(join(tmpdir(), 'vesselry-form-typing-'));
  const shared = {
    configFile: false as const,
    root: fileURLToPath(new URL('./form-typing', import.meta.url)),
    logLevel: 'error' as const,
    plugins: [react(), tailwindcss()],
    build: { outDir, emptyOutDir: true },
  };
  await build(shared);
  const server = await preview({ ...shared, preview: { port: 0, host: '127.0.0.1' } });
  const browser = await launchChromium();
  try {
    const address = server.resolvedUrls?.local[0] ?? '';
    const own = await measured(await browser.newPage(), address, 'input[id$="/group7/value5"]');
    const reading = await measured(await browser.newPage(), address, 'input[id$="/row25/2"]');
    const plain = await measured(await browser.newPage(), `${address}?plain`, '#root_group7_value5');
    print('product, a number', own);
    print('product, a reading', reading);
    print('library alone', plain);
    console.log(`ratio library / product, per key: ${(plain.key / own.key).toFixed(0)}`);
  } finally {
    await browser.close();
    await server.close();
    await rm(outDir, { recursive: true });
  }
}

interface Cost {
  /** Milliseconds of script. */
  first: number;
  key: number;
  worstKey: number;
  commit: number;
}

async function measured(page: Page, address: string, field: string): Promise<Cost> {
  const session = await page.context().newCDPSession(page);
  page.on('pageerror', (error) => console.log('pageerror', error.message));
  await session.send('Performance.enable');
  await page.goto(address, { waitUntil: 'networkidle' });
  await page.waitForSelector(field);
  const first = await scriptTime(session);
  await page.focus(field);
  const keys: number[] = [];
  for (const key of '1234567890'.repeat(2)) keys.push(await costOf(session, () => page.keyboard.press(key)));
  const commit = await costOf(session, () => page.keyboard.press('Tab'));
  await page.close();
  const sorted = keys.sort((a, b) => a - b);
  return { first, key: sorted[10] ?? 0, worstKey: sorted.at(-1) ?? 0, commit };
}

async function costOf(session: CDPSession, act: () => Promise<void>): Promise<number> {
  const before = await scriptTime(session);
  await act();
  await new Promise((resolve) => setTimeout(resolve, 60));
  return (await scriptTime(session)) - before;
}

async function scriptTime(session: CDPSession): Promise<number> {
  const { metrics } = await session.send('Performance.getMetrics');
  return (metrics.find(({ name }) => name === 'ScriptDuration')?.value ?? 0) * 1000;
}

function print(name: string, { first, key, worstKey, commit }: Cost): void {
  const ms = (value: number) => `${value.toFixed(1)} ms`.padStart(10);
  console.log(
    `${name.padEnd(20)} first ${ms(first)}  key, median ${ms(key)}  worst ${ms(worstKey)}  leaving the field ${ms(commit)}`,
  );
}

await main();
