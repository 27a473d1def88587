import type { ExpressionCompiler } from '../expressions/expression.ts';
import type { CompiledCheck, CompiledField } from './compiled-instrument.ts';
import { pointerOf } from './compile-derivations.ts';
import type { InstrumentCheck, InstrumentProblem } from './instrument.ts';

/** Identifiers of findings that come from the schema itself. */
const reservedIds = ['required', 'readings', 'extra-reading', 'schema'];

/** Compiles the checks; refuses unknown fields, doubled identifiers and expressions that are not true or false. */
export function compileChecks(
  checks: InstrumentCheck[],
  fields: Map<string, CompiledField>,
  compiler: ExpressionCompiler,
): { checks: CompiledCheck[]; problems: InstrumentProblem[] } {
  const problems: InstrumentProblem[] = [];
  const compiled: CompiledCheck[] = [];
  const seen = new Set<string>(reservedIds);
  for (const [index, check] of checks.entries()) {
    const place = `/checks/${index}`;
    if (seen.has(check.id))
      problems.push({ pointer: `${place}/id`, message: `${check.id} is taken: give each check its own id` });
    seen.add(check.id);
    for (const [at, pointer] of check.fields.entries()) {
      if (!fields.has(pointer))
        problems.push({ pointer: `${place}/fields/${at}`, message: `There is no field ${pointer}` });
    }
    const expression = compiler.compile(check.expression, 'bool');
    if ('problems' in expression) {
      const pointer = `${place}/expression`;
      problems.push(
        ...expression.problems.map(({ message, start, end }) => ({
          pointer,
          message,
          range: { start, end },
        })),
      );
      continue;
    }
    if (expression.dependencies.length === 0) {
      problems.push({ pointer: `${place}/expression`, message: 'The check reads no field' });
    }
    const inputs = expression.dependencies.map(pointerOf);
    compiled.push({
      id: check.id,
      severity: check.severity,
      message: check.message,
      expression,
      inputs,
      pointers: [...new Set([...check.fields, ...inputs])],
      readings: check.readings ?? 'counted',
      opensQuery: check.opensQuery ?? false,
      level: 'open',
    });
  }
  return { checks: compiled, problems };
}
