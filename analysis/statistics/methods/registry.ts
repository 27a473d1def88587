import type { Method } from '../core/method.ts';
import type { MethodName } from '../core/plan.ts';
import { pairedT } from './paired-t.ts';

const list: readonly Method[] = [
  pairedT,
  // Variance, linear and mixed models go here, one a line, in the contract's order.
];

/** Every method by its name. */
export const methods = Object.fromEntries(list.map((method) => [method.name, method])) as Readonly<
  Record<MethodName, Method>
>;
