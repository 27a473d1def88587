import type { FoundField } from './expand-fields.ts';
import type { InstrumentProblem } from './instrument.ts';

/** Names that make one think of a direct identifier. */
const directIdentifier =
  /^(first|last|family|given|full|maiden)?(name|surname|initials)$|birth|address|phone|email|passport|insurance|socialSecurity|recordNumber|photo/i;

/** What an author should know about a field: the traps of JSON Schema (IV-07), labels that will be cut, likely identifiers. */
export function lintField({ name, schema, schemaPointer }: FoundField): InstrumentProblem[] {
  const warnings: InstrumentProblem[] = [];
  const warn = (keyword: string, message: string) =>
    warnings.push({ pointer: `${schemaPointer}${keyword}`, message });
  const { pattern } = schema;
  if (pattern !== undefined && !(pattern.startsWith('^') && pattern.endsWith('$'))) {
    const sample = 'x…x';
    warn(
      '/pattern',
      `The pattern matches anywhere, so text around it (${sample}) passes: begin it with ^ and end it with $`,
    );
  }
  if (schema.type === 'integer') warn('/type', 'An integer may also be written 1.0');
  if (schema.title === undefined) warn('', 'The field has no label: give it a title');
  if ((schema.title?.length ?? 0) > 40) warn('/title', 'Labels above 40 characters are cut in ODM and CDISC');
  if (directIdentifier.test(name)) {
    warn(
      '',
      'This looks like a direct identifier: names, dates of birth and contact details belong to the participant’s identifier form',
    );
  }
  return warnings;
}
