import type { EntitySchema } from '@mikro-orm/postgresql';

/**
 * How a column stands in the trail.
 * `plain` the value is recorded · `digest` only its SHA-256 · `presence` only that it was written ·
 * `unblinding` recorded, shown to unblinded members only · `skip` not in the trail (it lies elsewhere, or says nothing).
 */
export type ColumnRule = 'plain' | 'digest' | 'presence' | 'unblinding' | 'skip';

export interface AuditRule {
  /** The word the trail uses for the row. */
  subject: string;
  /** Which chain its changes belong to; `study` rows are refused in another study's act. */
  chain: 'study' | 'self' | 'system' | 'study-or-system';
  /** Columns that are not `plain`. */
  columns: Record<string, ColumnRule>;
}

const rules = new Map<string, AuditRule>();

/** Declares that every change of this entity is an act: written outside one, it is refused. */
export function audited(
  schema: EntitySchema<never> | { meta: { className: string } },
  rule: AuditRule,
): void {
  rules.set(schema.meta.className, rule);
}

/** The rule of an entity; undefined for the few tables that are machinery (jobs, sessions). */
export const auditRuleOf = (entityName: string): AuditRule | undefined => rules.get(entityName);
