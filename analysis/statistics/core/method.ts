import type { MethodName, Plan } from './plan.ts';
import type { Outcome } from './result.ts';
import type { Table } from './table.ts';

/**
 * One method of the contract, one file in `methods/`, one line in `methods/registry.ts`.
 *
 * What a method may count on: the plan has passed its schema (types, required fields, number of levels), defaults are
 * filled in, every column the plan names exists, the data have at least one row. What it has to do itself: the checks
 * from "numbers" on in the contract's order, most of which `completeCells`, `pairsOf` and `Table` do on the way.
 *
 *   export const pairedT: Method = { name: 'paired_t', run: (plan, table) => ({ n, dropped, estimates }) };
 *
 * `check` refuses a plan by its own content, before any look at the data (throw `invalidPlan('…')`).
 * `run` may leave non-finite numbers where a value does not exist: they become null. It sorts nothing in `dropped`.
 * The power methods ignore the table.
 */
export interface Method {
  readonly name: MethodName;
  check?(plan: Plan): void;
  run(plan: Plan, table: Table): Outcome;
}
