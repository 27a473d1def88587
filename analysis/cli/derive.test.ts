import { execFile } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../../', import.meta.url));
let folder: string;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'derive-'));
});
afterAll(() => rm(folder, { recursive: true }));

/** Runs the command as a user does and reads its one JSON value. */
async function run(...args: string[]): Promise<{ exitCode: number; output: unknown }> {
  return new Promise((resolve, reject) => {
    execFile(
      process.execPath,
      ['--import', 'tsx', 'analysis/cli/derive.ts', ...args],
      { cwd: root },
      (error, stdout) => {
        if (error && typeof error.code !== 'number') reject(new Error(error.message));
        else resolve({ exitCode: Number(error?.code ?? 0), output: JSON.parse(stdout) as unknown });
      },
    );
  });
}

async function file(text: string): Promise<string> {
  const path = join(folder, `${Math.abs(text.length)}.json`);
  await writeFile(path, text);
  return path;
}

describe('derive', () => {
  it('answers each case in order, errors among values, and exits 0', async () => {
    const map = { value: 90, unit: 'mm[Hg]' };
    const cases = [
      {
        id: 'b',
        quantity: 'forearmVascularResistance',
        inputs: { map, fbf: { value: 2.5, unit: 'mL/min/dL' } },
      },
      { id: 'a', quantity: 'fvr', inputs: { map, fbf: { value: 0, unit: 'mL/min/dL' } } },
      { id: 7, quantity: 'no_such_quantity', inputs: {} },
      'no case',
    ];
    const { exitCode, output } = await run(await file(JSON.stringify(cases)));
    expect(exitCode).toBe(0);
    expect(output).toMatchObject([
      { id: 'b', value: 36, unit: 'mm[Hg].min.dL/mL', cautions: [{ code: 'VENOUS_PRESSURE_NEGLECTED' }] },
      { id: 'a', error: { code: 'outside_domain', argument: 'fbf' } },
      { id: 7, error: { code: 'unknown_quantity' } },
      { id: null, error: { code: 'invalid_case' } },
    ]);
  });

  it('lists every quantity with inputs, units, domain, formula and source', async () => {
    const { exitCode, output } = await run('--list');
    expect(exitCode).toBe(0);
    expect(output).toContainEqual(
      expect.objectContaining({
        key: 'fvr',
        name: 'forearmVascularResistance',
        unit: 'mm[Hg].min.dL/mL',
        formula: 'map / fbf',
      }),
    );
  });

  it('exits 2 when the file cannot be read as cases', async () => {
    expect(await run(join(folder, 'absent.json'))).toMatchObject({
      exitCode: 2,
      output: { error: { code: 'unreadable_file' } },
    });
    expect(await run(await file('{"id":'))).toMatchObject({
      exitCode: 2,
      output: { error: { code: 'invalid_file' } },
    });
    expect(await run(await file('{"id":1}'))).toMatchObject({
      exitCode: 2,
      output: { error: { code: 'invalid_file' } },
    });
    expect(await run()).toMatchObject({ exitCode: 2, output: { error: { code: 'invalid_arguments' } } });
  });
});
