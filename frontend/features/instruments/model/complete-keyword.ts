import type { Completion, CompletionContext, CompletionResult } from '@codemirror/autocomplete';
import { quantities } from '#analysis/quantities/registry.ts';
import { instrumentMetaSchema } from '#schemas/instruments/meta-schema.ts';
import { cautionTexts } from '#schemas/vocabulary/caution-texts.ts';
import { units } from '#schemas/vocabulary/units.ts';

const keywords: Completion[] = Object.entries(
  instrumentMetaSchema.properties as Record<string, { description?: string }>,
).map(([label, { description }]) => ({
  label,
  type: 'property',
  ...(description ? { info: description } : {}),
}));

/** What may stand as the value of a keyword, where the list is closed or a suggestion helps. */
const valuesOf: Record<string, Completion[]> = {
  unit: units.map(({ code, shown, name }) => ({ label: code, detail: `${shown} · ${name}` })),
  quantity: [...quantities.keys()].map((label) => ({ label })),
  type: ['number', 'integer', 'string', 'boolean', 'array', 'object'].map((label) => ({ label })),
  format: [{ label: 'date' }, { label: 'date-time' }],
  identifying: [{ label: 'none' }, { label: 'quasi' }],
  severity: [{ label: 'hard' }, { label: 'soft' }],
  summary: [{ label: 'mean' }, { label: 'median' }],
  cautions: Object.entries(cautionTexts).map(([label, { title }]) => ({ label, detail: title })),
};

/** Completes keywords where a name begins, and units, quantities and the like where their value does. */
export function completeKeyword(context: CompletionContext): CompletionResult | null {
  const value = context.matchBefore(/"(\w+)"\s*:\s*\[?(?:\s*"[^"\n]*",)*\s*"[^"\n]*/);
  if (value) {
    const [, keyword = ''] = /^"(\w+)"/.exec(value.text) ?? [];
    const options = valuesOf[keyword];
    return options
      ? { from: value.from + value.text.lastIndexOf('"') + 1, options, validFor: /^[^"]*$/ }
      : null;
  }
  const name = context.matchBefore(/[{,]\s*"[\w$]*/);
  if (!name) return null;
  return { from: name.from + name.text.lastIndexOf('"') + 1, options: keywords, validFor: /^[\w$]*$/ };
}
