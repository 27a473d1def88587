import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

const program = fileURLToPath(new URL('./analyse.ts', import.meta.url));
const plan = { method: 'paired_t', outcome: 'v', subject: 's', condition: 'c', levels: ['x', 'y'] };
const csv = 's,c,v\na,x,1\na,y,2\nb,x,3\nb,y,1\nc,x,5\nc,y,4\n';
const power = { method: 'power_paired_t', effect_size: 0.5, n: 24 };

function start(words: string[], input = '') {
  const { status, stdout } = spawnSync(process.execPath, ['--import', 'tsx', program, ...words], {
    input,
    encoding: 'utf8',
  });
  return {
    status,
    lines: stdout
      .trimEnd()
      .split('\n')
      .map((line) => JSON.parse(line) as Record<string, unknown>),
  };
}

describe('the analyse command', () => {
  let folder = '';
  const file = (name: string, content: string | Buffer) => {
    writeFileSync(join(folder, name), content);
    return join(folder, name);
  };
  beforeAll(() => {
    folder = mkdtempSync(join(tmpdir(), 'analyse-'));
  });
  afterAll(() => rmSync(folder, { recursive: true }));

  it('prints one object and ends with 0 for a result', () => {
    const { status, lines } = start([
      '--plan',
      file('plan.json', JSON.stringify(plan)),
      '--data',
      file('data.csv', csv),
    ]);
    expect(status).toBe(0);
    expect(lines).toMatchObject([{ method: 'paired_t', n: 3, estimates: { df: 2 } }]);
  });

  it('ends with 2 and names the fault of bad input: no plan, no JSON, no UTF-8', () => {
    expect(start([])).toMatchObject({ status: 2, lines: [{ error: { code: 'invalid_plan' } }] });
    expect(start(['--plan', file('bad.json', '{')])).toMatchObject({
      status: 2,
      lines: [{ error: { code: 'invalid_plan' } }],
    });
    const latin = file('latin.csv', Buffer.from([0x73, 0x2c, 0xe9]));
    expect(start(['--plan', file('plan.json', JSON.stringify(plan)), '--data', latin])).toMatchObject({
      status: 2,
      lines: [{ error: { code: 'malformed_csv' } }],
    });
  });

  it('answers each line of a batch in order, bad ones too, and ends with 0', () => {
    const requests = [
      JSON.stringify({ id: 'one', plan, csv: csv.replace('a,x', '\u2028a,x').replace('a,y', '\u2028a,y') }),
      'no JSON',
      JSON.stringify({ id: 2, plan: { method: 'none' }, csv: null }),
      JSON.stringify({ id: 'no csv', plan }),
      JSON.stringify({ id: 'last', plan: power, csv: null }),
    ];
    const { status, lines } = start(['--batch'], requests.join('\n'));
    expect(status).toBe(0);
    expect(lines).toMatchObject([
      { id: 'one', exit_code: 0, output: { n: 3 } },
      { id: null, exit_code: 2, output: { error: { code: 'invalid_plan' } } },
      { id: 2, exit_code: 2, output: { error: { code: 'invalid_plan' } } },
      { id: null, exit_code: 2, output: { error: { code: 'invalid_plan' } } },
      { id: 'last', exit_code: 0, output: { method: 'power_paired_t' } },
    ]);
  });
});
