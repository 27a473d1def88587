import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { filesBelow, root } from './project-files.ts';
import { openRows } from './open-rows.ts';
import { standardsRows } from './standards-rows.ts';

const rowId = /\b[A-Z]{2}-\d{2}\b/g;
const claim = /\bproves [A-Z]{2}-\d{2}.*/g;

/** Row → the test files that name it. */
function provedRows(): Map<string, string[]> {
  const proved = new Map<string, string[]>();
  for (const file of filesBelow(['schemas', 'analysis', 'backend', 'frontend', 'tests'], /\.test\.tsx?$/)) {
    const text = readFileSync(`${root}/${file}`, 'utf8');
    for (const line of text.match(claim) ?? []) {
      for (const id of line.match(rowId) ?? []) proved.set(id, [...(proved.get(id) ?? []), file]);
    }
  }
  return proved;
}

const proved = provedRows();

// proves VD-01
describe('the rows of the standards', () => {
  it('are each proved by a test or open with a reason, never both', () => {
    const verdicts = Object.keys(standardsRows).flatMap((id) => {
      if (proved.has(id) && openRows[id] !== undefined) return [`${id} is proved: take it off the open rows`];
      if (!proved.has(id) && openRows[id] === undefined) return [`${id} is neither proved nor open`];
      return [];
    });
    expect(verdicts).toEqual([]);
    for (const [id, reason] of Object.entries(openRows)) expect(reason.length, id).toBeGreaterThan(10);
  });

  it('are all there are: no test and no open reason names another', () => {
    const unknown = [...proved.keys(), ...Object.keys(openRows)].filter((id) => !(id in standardsRows));
    expect(unknown.map((id) => `${id} in ${proved.get(id)?.join(', ') ?? 'open rows'}`)).toEqual([]);
  });

  const source = `${root}/../shared/design/standards.md`;
  it.skipIf(!existsSync(source))('are those of the design page, with its levels', () => {
    const text = readFileSync(source, 'utf8');
    const listed = [...text.matchAll(/^\| ([A-Z]{2}-\d{2}) \| (MUST|SHOULD|BEYOND) \|/gm)];
    const ours = Object.entries(standardsRows).map(([id, [level]]) => `${id} ${level}`);
    expect(ours.sort()).toEqual(listed.map(([, id, level]) => `${id} ${level}`).sort());
  });
});
