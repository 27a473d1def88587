import type { InstrumentProblem, InstrumentSchema } from './instrument.ts';
import { instrumentLimits } from './limits.ts';

/**
 * Refuses what is too large or too deep before anything recursive sees it (WS-10).
 * Walks with a list of its own, so that ten thousand levels cannot exhaust the stack.
 */
export function boundsProblem(schema: unknown): InstrumentProblem | undefined {
  let references = 0;
  const waiting: { value: unknown; depth: number }[] = [{ value: schema, depth: 0 }];
  for (let next = waiting.pop(); next; next = waiting.pop()) {
    const { value, depth } = next;
    if (typeof value !== 'object' || value === null) continue;
    if (depth > instrumentLimits.depth) {
      return {
        pointer: '',
        message: `Objects and lists are nested more than ${instrumentLimits.depth} deep`,
      };
    }
    for (const [key, child] of Object.entries(value)) {
      if (key === '$ref') references += 1;
      waiting.push({ value: child, depth: depth + 1 });
    }
  }
  if (references > instrumentLimits.references) {
    return {
      pointer: '',
      message: `At most ${instrumentLimits.references} references ($ref): there are ${references}`,
    };
  }
  return undefined;
}

/**
 * Refuses references that lead nowhere or in a circle, and documents that unfold beyond the bound:
 * seventeen nested pairs of references make 131,072 evaluations out of a page of text.
 */
export function referenceProblem(schema: InstrumentSchema): InstrumentProblem | undefined {
  const sizes = new Map<string, number>();
  const open = new Set<string>();
  let problem: InstrumentProblem | undefined;

  const sizeOf = (node: unknown, pointer: string): number => {
    if (typeof node !== 'object' || node === null || problem) return 0;
    let size = 1;
    for (const [key, child] of Object.entries(node)) {
      if (key === '$defs' && pointer === '') continue;
      const place = `${pointer}/${key}`;
      size += key === '$ref' && typeof child === 'string' ? referredSize(child, place) : sizeOf(child, place);
    }
    return size;
  };

  const referredSize = (reference: string, pointer: string): number => {
    const known = sizes.get(reference);
    if (known !== undefined) return known;
    const name = reference.replace('#/$defs/', '');
    const target = schema.$defs && Object.hasOwn(schema.$defs, name) ? schema.$defs[name] : undefined;
    if (target === undefined)
      problem ??= { pointer, message: `${reference} leads nowhere: define ${name} under $defs` };
    if (open.has(reference)) problem ??= { pointer, message: `${reference} refers to itself` };
    if (problem) return 0;
    open.add(reference);
    const size = sizeOf(target, `/$defs/${name}`);
    open.delete(reference);
    sizes.set(reference, size);
    return size;
  };

  const total = sizeOf(schema, '');
  if (problem) return problem;
  // A definition that nothing refers to is compiled as well.
  for (const name of Object.keys(schema.$defs ?? {})) referredSize(`#/$defs/${name}`, `/$defs/${name}`);
  const largest = Math.max(total, ...sizes.values());
  if (problem || largest <= instrumentLimits.expandedNodes) return problem;
  return {
    pointer: '',
    message: `With its references followed the document has ${largest} parts, at most ${instrumentLimits.expandedNodes} are taken`,
  };
}
