import { AnalysisError } from './core/analysis-error.ts';
import { columnsOf } from './core/plan-columns.ts';
import type { Plan } from './core/plan.ts';
import type { Dropped, Outcome, Result, Row } from './core/result.ts';
import { Table } from './core/table.ts';
import { validatePlan } from './core/validate-plan.ts';
import { methods } from './methods/registry.ts';

/**
 * Runs a plan on the text of a data file: the one engine behind the command and the server.
 *
 * Shape    plan: parsed JSON of any kind; csv: text of the file, null for the power methods. Pure: same input, same bytes
 * Errors   AnalysisError for bad input, checked in the contract's order; anything else thrown is a defect
 * Source   shared/design/analysis-contract.md
 *
 * @example analyse({ method: 'power_paired_t', effect_size: 0.5, n: 24 }, null).estimates.power
 */
export function analyse(input: unknown, csv: string | null): Result {
  const plan = validatePlan(input);
  const method = methods[plan.method];
  method.check?.(plan);
  const table = plan.method.startsWith('power_') ? new Table({ header: [], rows: [] }) : tableOf(plan, csv);
  const outcome = method.run(plan, table);
  return present(plan, table, outcome);
}

function tableOf(plan: Plan, csv: string | null): Table {
  if (csv === null) throw new AnalysisError('empty_data', {}, 'This method needs data.');
  const table = Table.ofCsv(csv);
  table.requireColumns(columnsOf(plan));
  return table;
}

function present(plan: Plan, table: Table, outcome: Outcome): Result {
  const { n, dropped = [], estimates, tables = {}, warnings = [] } = outcome;
  return {
    method: plan.method,
    n,
    dropped: inFileOrder(dropped, plan, table),
    estimates: finiteOrNull(estimates),
    tables: Object.fromEntries(
      Object.entries(tables).map(([name, rows]) => [name, rows.map((row) => finiteOrNull(row))]),
    ),
    warnings,
  };
}

function inFileOrder(dropped: Dropped[], plan: Plan, table: Table): Dropped[] {
  if (dropped.length < 2 || plan.subject === undefined) return dropped;
  const first = new Map<string, number>();
  table.text(plan.subject).forEach((subject, row) => {
    if (!first.has(subject)) first.set(subject, row);
  });
  return dropped.toSorted((a, b) => first.get(a.subject)! - first.get(b.subject)!);
}

/** JSON has no infinities: a value that does not exist is null. */
function finiteOrNull<T extends Row>(row: T): T {
  return Object.fromEntries(
    Object.entries(row).map(([key, value]) => [
      key,
      typeof value === 'number' && !Number.isFinite(value) ? null : value,
    ]),
  ) as T;
}
