import { createHash } from 'node:crypto';
import { analysisColumns } from '#analysis/study/analysis-table.ts';
import type { StudyResult } from '#analysis/study/run-study.ts';
import type { StudyPlan } from '#analysis/study/study-plan.ts';
import { sha256 } from '#backend/database/trail/canonical.ts';
import { ExportCodes } from './codes.ts';
import type { Collected, InstrumentTable } from './collect.ts';
import type { BundleFacts } from './facts.ts';
import { csvText, type Cell } from './csv.ts';
import { readmeText } from './readme.ts';
import { rScript } from './r-script.ts';
import { treatmentWords } from './treatment.ts';

export interface BundleFile {
  name: string;
  text: string;
}

/** Everything that leaves, each file whole; the manifest comes last and seals the others. */
export function bundleFiles(
  collected: Collected,
  plan: StudyPlan,
  result: StudyResult,
  facts: BundleFacts,
): BundleFile[] {
  const participants = new ExportCodes('P-');
  const sites = new ExportCodes('S-');
  const files: BundleFile[] = [];
  files.push(participantsFile(collected, participants, sites));
  for (const table of collected.tables) files.push(tableFile(table, participants));
  files.push(analysisFile(result, participants), expectedFile(result));
  for (const { key, version, compiled } of collected.tables) {
    files.push(jsonFile(`instruments/${key}-v${version}.schema.json`, compiled.schema));
  }
  files.push(...dictionaryFiles(collected.tables));
  files.push(jsonFile('plan.json', plan), jsonFile('result.json', rekeyed(result, participants)));
  files.push(
    { name: 'analysis.R', text: rScript(plan) },
    { name: 'README.md', text: readmeText(collected, facts) },
  );
  files.push(checksumsFile(files));
  return [...files, manifestFile(files, facts)];
}

const jsonFile = (name: string, content: unknown): BundleFile => ({
  name,
  text: `${JSON.stringify(content, null, 2)}\n`,
});

const textOf = (cell: Cell | undefined): string => (typeof cell === 'string' ? cell : (cell?.number ?? ''));

/** Rows in the order of their first cells, so that no other order shows through. */
const byCells =
  (...places: number[]) =>
  (a: readonly Cell[], b: readonly Cell[]): number =>
    places.reduce(
      (order, at) => order || textOf(a[at]).localeCompare(textOf(b[at]), 'en', { numeric: true }),
      0,
    );

function participantsFile(
  { participants: all }: Collected,
  codes: ExportCodes,
  sites: ExportCodes,
): BundleFile {
  const rows = all
    .map(({ participant, site }): Cell[] => [codes.of(participant), sites.of(site)])
    .sort(byCells(0));
  return { name: 'participants.csv', text: csvText(['participant', 'site'], rows) };
}

function tableFile({ key, version, columns, rows }: InstrumentTable, codes: ExportCodes): BundleFile {
  const names = columns.flatMap(({ name }) => [name, `${name}_why`]);
  const cells = rows.map((row): Cell[] => [
    codes.of(row.participant),
    row.visitType,
    row.step,
    row.period === '' ? null : { number: row.period },
    row.studyDay,
    ...row.cells,
  ]);
  return {
    name: `data/${key}-v${version}.csv`,
    text: csvText(
      ['participant', 'visit_type', 'step', 'period', 'study_day', ...names],
      cells.sort(byCells(0, 1, 2)),
    ),
  };
}

function analysisFile({ table }: StudyResult, codes: ExportCodes): BundleFile {
  const rows = table.map((row) =>
    analysisColumns.map((column): Cell => {
      const value = row[column];
      if (column === 'participant') return codes.of(String(value));
      return value === null ? null : typeof value === 'number' ? { number: String(value) } : value;
    }),
  );
  rows.sort(byCells(0, 1));
  return { name: 'analysis.csv', text: csvText(analysisColumns, rows) };
}

function expectedFile({ effects }: StudyResult): BundleFile {
  const rows = effects.map(({ outcome, n, logEstimate, logLower, logUpper, pValue }): Cell[] => [
    outcome,
    ...[n, logEstimate, logLower, logUpper, pValue].map((value) => ({ number: String(value) })),
  ]);
  return {
    name: 'expected.csv',
    text: csvText(['outcome', 'n', 'estimate', 'lower', 'upper', 'p_value'], rows),
  };
}

/** The result with this export's codes in the place of the study's. */
function rekeyed(result: StudyResult, codes: ExportCodes): StudyResult {
  const swap = <T extends { participant: string }>(rows: readonly T[]): T[] =>
    rows
      .map((row) => ({ ...row, participant: codes.of(row.participant) }))
      .sort((a, b) => a.participant.localeCompare(b.participant, 'en'));
  const text = JSON.stringify({
    ...result,
    participants: swap(result.participants),
    leftOut: swap(result.leftOut),
    table: swap(result.table as unknown as { participant: string }[]),
  });
  // Whatever a method says of single subjects, its dropped list included, is under "subject".
  return JSON.parse(text, (name, value: unknown) =>
    name === 'subject' && typeof value === 'string' ? codes.of(value) : value,
  ) as StudyResult;
}

/** A row a column, one to one with the tables (XC-12). */
function dictionaryFiles(tables: readonly InstrumentTable[]): BundleFile[] {
  const entries = tables.flatMap(({ key, version, columns }) =>
    columns.map(({ name, field, treatment }) => ({
      file: `data/${key}-v${version}.csv`,
      column: name,
      label: field.label,
      type: field.type,
      unit: field.unit ?? '',
      choices: (field.choices ?? []).map(({ value, label }) => `${value} = ${label}`).join('; '),
      derived: field.derived ? 'yes' : 'no',
      test_code: field.testCode ?? '',
      identifying: field.visibility.identifying,
      treatment: treatmentWords[treatment.kind],
      missing: `${name}_why holds the reason where ${name} is empty`,
    })),
  );
  const columns = [
    'file',
    'column',
    'label',
    'type',
    'unit',
    'choices',
    'derived',
    'test_code',
    'identifying',
    'treatment',
    'missing',
  ] as const;
  return [
    {
      name: 'dictionary.csv',
      text: csvText(
        columns,
        entries.map((entry) => columns.map((column) => entry[column] || null)),
      ),
    },
    jsonFile('dictionary.json', entries),
  ];
}

/** MD5 is what base R can compute: it finds a changed cell, it is no proof against an adversary; the manifest is. */
function checksumsFile(files: readonly BundleFile[]): BundleFile {
  const rows = files
    .filter(({ name }) => name === 'analysis.csv' || name === 'expected.csv')
    .map(({ name, text }): Cell[] => [name, createHash('md5').update(text).digest('hex')]);
  return { name: 'checksums.csv', text: csvText(['file', 'md5'], rows) };
}

function manifestFile(files: readonly BundleFile[], facts: BundleFacts): BundleFile {
  return jsonFile('manifest.json', {
    ...facts,
    status: 'de-identified (coded)',
    files: files.map(({ name, text }) => ({ name, bytes: Buffer.byteLength(text), sha256: sha256(text) })),
  });
}
