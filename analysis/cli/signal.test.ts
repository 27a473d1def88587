import { execFile } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../../', import.meta.url));
let folder: string;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'signal-'));
});
afterAll(() => rm(folder, { recursive: true }));

async function run(
  kind: string,
  text: string,
  ...options: string[]
): Promise<{ exitCode: number; output: unknown }> {
  const data = join(folder, 'record.csv');
  await writeFile(data, text);
  return new Promise((resolve, reject) => {
    const args = ['--import', 'tsx', 'analysis/cli/signal.ts', kind, '--data', data, ...options];
    execFile(process.execPath, args, { cwd: root }, (error, stdout) => {
      if (error && typeof error.code !== 'number') reject(new Error(error.message));
      else resolve({ exitCode: Number(error?.code ?? 0), output: JSON.parse(stdout) as unknown });
    });
  });
}

const rows = (header: string, seconds: number, value: (time: number) => string) =>
  [header, ...Array.from({ length: seconds * 100 }, (_, i) => `${i / 100},${value(i / 100)}`)].join('\n');

describe('signal', () => {
  it('prints mean, extremes, rate, form factor and beats of an arterial pressure record', async () => {
    const text = rows('time_s,arterial_pressure_mmHg', 20, (t) =>
      String(100 + 20 * Math.sin(2 * Math.PI * 1.25 * t)),
    );
    const { exitCode, output } = await run('arterial-pressure', text);
    expect(exitCode).toBe(0);
    expect(output).toMatchObject({
      time_mean: { value: expect.closeTo(100, 1) as number, unit: 'mm[Hg]' },
      systolic: { value: expect.closeTo(120, 0) as number, unit: 'mm[Hg]' },
      diastolic: { value: expect.closeTo(80, 0) as number, unit: 'mm[Hg]' },
      heart_rate: { value: expect.closeTo(75, 0) as number, unit: '/min' },
      form_factor: { value: expect.closeTo(0.5, 1) as number, unit: '1' },
      beats: { value: 25, unit: '1' },
    });
    expect((output as { beat_list: unknown[] }).beat_list).toHaveLength(24);
  });

  it('prints a flow for each filling phase of a plethysmograph record in millivolt', async () => {
    const filling = (t: number) => String((t % 15 < 10 ? t % 15 : 0) + 0.1 * Math.sin(7 * t));
    const text = rows(
      'time_s,gauge_mV,cuff_pressure_mmHg',
      34,
      (t) => `${filling(t)},${t > 0.5 && t % 15 < 10 ? 50 : 0}`,
    );
    const calibration = ['--calibration-deflection', '20', '--calibration-percent', '1'];
    const { exitCode, output } = await run('plethysmograph', text, ...calibration);
    expect(exitCode).toBe(0);
    // 1 mV/s at 20 mV per % is 0.05 %/s: 3 mL/min/dL
    expect(output).toMatchObject({
      readings: [
        { flow: { value: expect.closeTo(3, 0) as number, unit: 'mL/min/dL' } },
        { slope: { unit: '%/s' } },
      ],
    });
    expect(await run('plethysmograph', text)).toMatchObject({
      exitCode: 2,
      output: { error: { code: 'calibration_missing' } },
    });
  });

  it('exits 2 with code and row for a record that cannot be used', async () => {
    expect(await run('arterial-pressure', 'time_s,pressure_mmHg\n0,80\n1,x\n')).toMatchObject({
      exitCode: 2,
      output: { error: { code: 'non_numeric_cell', row: 3 } },
    });
    expect(await run('electrocardiogram', '')).toMatchObject({
      exitCode: 2,
      output: { error: { code: 'invalid_arguments' } },
    });
  });
});
