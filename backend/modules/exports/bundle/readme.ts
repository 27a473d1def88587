import type { Collected } from './collect.ts';
import type { BundleFacts } from './facts.ts';

/** What is in the bundle, how to re-run it, and what it must not be taken for. */
export function readmeText({ head, participants, tables, leftOut }: Collected, facts: BundleFacts): string {
  return `# De-identified export ${facts.exportNumber}

${participants.length} participants, ${tables.length} instruments; run ${facts.run.number} of cut ${facts.cut.number}.

For research under an approved protocol. Not for diagnosis, treatment or monitoring of patients. The data are
de-identified (coded), which does not mean that nobody can be recognised: do not try to, and pass them on only under
the terms under which you got them.

## Files
- \`participants.csv\`: codes made for this export alone, and coded sites.
- \`data/\`: one table an instrument version. Beside each column \`x\` a column \`x_why\` says why \`x\` is empty, or why a
  reading was set aside.
- \`analysis.csv\`: the analysis-ready table, one row a participant and period. \`expected.csv\`: the run's numbers.
- \`analysis.R\`: reproduces them with base R: \`Rscript analysis.R\`.
- \`dictionary.csv\`, \`dictionary.json\`: every column. \`instruments/\`: the instruments as JSON Schema (2020-12).
- \`plan.json\`: the plan as signed. \`result.json\`: the whole result. \`manifest.json\`: SHA-256 of every file.

## How it was made
${facts.method}
Study day 1 is the participant's first visit; there is no day 0. Text that a spreadsheet would run begins with an
apostrophe; numbers never do and keep the digits entered. Empty cells are missing.
Left out: ${[...new Set(leftOut.map(({ why }) => why))].join('; ') || 'nothing'} (${new Set(leftOut.map(({ field }) => field)).size} fields).

Conditions: ${head.conditions.map(({ key, label }) => `${key} = ${label}`).join('; ')}.
Protocol versions: ${head.protocols.map(({ version, hash }) => `${version} (${hash.slice(0, 12)})`).join(', ')}.
Computed with Vesselry ${facts.productVersion}, analysis engine ${facts.run.engineVersion}, seed ${facts.run.seed}.
`;
}
