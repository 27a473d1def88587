import type { ASTNode } from '@marcbachmann/cel-js';
import type { ExpressionProblem, ExpressionVariables } from './expression-types.ts';
import { children } from './syntax.ts';
import { nearestWord } from './nearest-word.ts';

/** The engine's own error, as far as it is read here. */
interface EngineError {
  code?: string;
  summary?: string;
  message: string;
  range?: { start: number; end: number };
}

/** Turns an error of the engine into a sentence that tells the author what to write. */
export function explainProblem(
  error: EngineError | undefined,
  text: string,
  variables: ExpressionVariables,
  root?: ASTNode,
): ExpressionProblem {
  const { start, end } = error?.range ?? { start: 0, end: text.length };
  const summary = error?.summary ?? error?.message ?? 'it cannot be read';
  const written = text.slice(start, end);
  return {
    message: sentence(error?.code, summary, written, variables, literalIn(root, start, end, text)),
    start,
    end,
  };
}

function sentence(
  code: string | undefined,
  summary: string,
  written: string,
  variables: ExpressionVariables,
  wholeNumber: string | undefined,
): string {
  if (code === 'unknown_variable' || code === 'no_such_key') return unknownName(written, variables);
  if (code === 'unexpected_character' && summary.endsWith('=')) return 'Write == to compare';
  if (code === 'no_such_overload' && /double/.test(summary) && /\bint\b/.test(summary)) {
    const remedy = wholeNumber ? `write ${wholeNumber}.0` : 'write double(…) around the whole-number field';
    return `${written} mixes a decimal number with a whole number: ${remedy}`;
  }
  if (code === 'no_such_overload' && /list<double>/.test(summary)) {
    return `${written} uses readings as one number: write mean(…) around the field, or all(x, …) for each reading`;
  }
  if (code === 'no_such_overload')
    return `${written} cannot be computed: ${summary.replace('no such overload: ', '')}`;
  if (code === 'no_matching_overload') return `${written} does not fit: ${argumentHint(summary)}`;
  if (code?.startsWith('invalid_') || code?.startsWith('incompatible_')) return summary;
  return `The expression cannot be read here: ${summary}. Use && for and, || for or, ! for not`;
}

function argumentHint(summary: string): string {
  const found = /'(.*)'/.exec(summary)?.[1] ?? '';
  if (/\bint\b/.test(found))
    return `${found} is not defined; functions take decimal numbers, write 3.0 or double(…)`;
  return `${found} is not defined; mean, median, sd, min and max take readings, abs, sqrt, log, exp and round one number`;
}

function unknownName(name: string, variables: ExpressionVariables): string {
  const names = allNames(variables);
  const nearest = nearestWord(name, names);
  if (nearest) return `There is no field ${name}: did you mean ${nearest}?`;
  return `There is no field ${name}. Fields: ${names.slice(0, 12).join(', ')}${names.length > 12 ? ', …' : ''}`;
}

function allNames(variables: ExpressionVariables, before = ''): string[] {
  return Object.entries(variables).flatMap(([name, type]) =>
    typeof type === 'string' ? [before + name] : allNames(type, `${before}${name}.`),
  );
}

/** The first whole number written between two positions. */
function literalIn(node: ASTNode | undefined, start: number, end: number, text: string): string | undefined {
  if (!node || node.range.end < start || node.range.start > end) return undefined;
  const inside = node.range.start >= start && node.range.end <= end;
  if (inside && node.op === 'value' && typeof node.args === 'bigint')
    return text.slice(node.range.start, node.range.end);
  for (const child of children(node)) {
    const found = literalIn(child, start, end, text);
    if (found) return found;
  }
  return undefined;
}
