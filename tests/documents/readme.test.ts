import { existsSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { settingTable } from '#backend/config/setting-table.ts';
import { demoAccounts } from '#backend/modules/accounts/demo-accounts.ts';
import { root } from './project-files.ts';

const page = (name: string): string => readFileSync(`${root}/${name}`, 'utf8');

/** Cells of the table below a heading, without its head. */
function tableBelow(text: string, heading: string): string[][] {
  const section = text.split(`\n## ${heading}\n`)[1]?.split('\n## ')[0] ?? '';
  return section
    .split('\n')
    .filter((line) => line.startsWith('|'))
    .slice(2)
    .map((line) =>
      line
        .split('|')
        .slice(1, -1)
        .map((cell) => cell.trim()),
    );
}

describe('README.md', () => {
  const readme = page('README.md');

  it('lists the demo accounts as the demo makes them', () => {
    expect(tableBelow(readme, 'Demo accounts')).toEqual(
      demoAccounts.map(({ name, roles, email, password }) => [
        name,
        roles,
        `\`${email}\``,
        `\`${password}\``,
      ]),
    );
  });

  it('lists every setting as the code reads it', () => {
    expect(tableBelow(readme, 'Settings')).toEqual(
      settingTable.map(({ name, fallback, purpose, requiredInProduction }) => [
        `\`${name}\``,
        fallback,
        purpose,
        requiredInProduction ? 'yes' : '',
      ]),
    );
  });
});

describe.each(['README.md', 'DEVELOPERS.md'])('%s', (name) => {
  const text = page(name);

  it('names only commands that exist', () => {
    const { scripts } = JSON.parse(page('package.json')) as { scripts: Record<string, string> };
    const named = [...text.matchAll(/npm run (?:--silent )?([a-z][a-z:-]*)/g)].map(
      ([, script]) => script ?? '',
    );
    expect(named.length).toBeGreaterThan(3);
    expect(named.filter((script) => !(script in scripts))).toEqual([]);
  });

  it('names only files and folders that exist', () => {
    const areas =
      /^(?:schemas|analysis|backend|frontend|tests|scripts|docs)\/[\w./@:-]*$|^[\w.-]+\.(?:md|json|ts|cjs|js)$/;
    const quoted = [...text.matchAll(/`([^`\s]+)`/g)].map(([, path]) => path ?? '');
    const pictures = [...text.matchAll(/\]\((docs\/[^)]+)\)/g)].map(([, path]) => path ?? '');
    const named = [...quoted.filter((path) => areas.test(path)), ...pictures];
    expect(named.length).toBeGreaterThan(0);
    expect(named.filter((path) => !existsSync(`${root}/${path}`))).toEqual([]);
  });
});
