import type { DisclosureReport } from '#schemas/api/exports.ts';
import type { Collected } from './collect.ts';

/** Groups smaller than this are named to the person who approves (DX-05). */
const threshold = 5;

/** Counts what would leave and who would stand alone in it. */
export function disclosureReport(
  collected: Collected,
  about: { cutSha256: string; runNumber: number },
): DisclosureReport {
  const groups = new Map<string, number>();
  for (const { participant } of collected.participants) {
    const values = [...(collected.quasiValues.get(participant) ?? new Map<string, string>())].sort(
      ([a], [b]) => a.localeCompare(b),
    );
    const key = JSON.stringify(values);
    groups.set(key, (groups.get(key) ?? 0) + 1);
  }
  const sizes = [...groups.values()];
  const smallestGroup = sizes.length === 0 ? 0 : Math.min(...sizes);
  const alone = sizes.filter((size) => size === 1).length;
  const participants = collected.participants.length;
  return {
    method:
      'Coded, de-identified: participants re-keyed at random for this export, dates as study days, ages above 89 pooled, free text and pictures out, sites as codes.',
    ...about,
    participants,
    instruments: collected.tables.map(({ key, version, rows, columns }) => ({
      key,
      version,
      rows: rows.length,
      columns: columns.length,
    })),
    quasiIdentifiers: unique(collected.quasiIdentifiers),
    leftOut: unique(collected.leftOut),
    smallestGroup,
    alone,
    threshold,
    agesPooled: collected.agesPooled,
    sentence:
      smallestGroup >= threshold
        ? `Every participant shares what leaves of the quasi-identifiers with at least ${smallestGroup - 1} others.`
        : `${alone} of ${participants} participants are alone in what leaves of the quasi-identifiers: with so few people a data set is de-identified, and someone who knows a participant may still recognise them.`,
  };
}

const unique = <T extends { field: string }>(rows: readonly T[]): T[] => [
  ...new Map(rows.map((row) => [row.field, row])).values(),
];
