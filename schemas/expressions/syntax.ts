import type { ASTNode } from '@marcbachmann/cel-js';
import { expressionLimits, type ExpressionProblem, type ExpressionVariables } from './expression-types.ts';
import { allowedCelCalls, macroCalls, ownCalls } from './functions.ts';

/** What the syntax tree tells: the fields read, as `field` or `group.field`, and the refusals. */
export interface SyntaxReport {
  dependencies: string[];
  problems: ExpressionProblem[];
}

/**
 * Walks a syntax tree for the fields it reads and for what may not be run (WS-10).
 * CEL itself has no bound on time: `matches` is the host's backtracking engine, and macros multiply.
 */
export function readSyntax(root: ASTNode, variables: ExpressionVariables): SyntaxReport {
  const dependencies = new Set<string>();
  const problems: ExpressionProblem[] = [];
  const refuse = (node: ASTNode, message: string) =>
    problems.push({ message, start: node.range.start, end: node.range.end });

  const visit = (node: ASTNode, bound: ReadonlySet<string>, macroLevel: number): void => {
    const path = fieldPath(node, bound);
    if (path) {
      const known = resolve(path, variables);
      if (known.leaf) dependencies.add(known.leaf);
      else if (known.group)
        refuse(node, `${known.group} is a group: write ${known.group}. and the name of one of its fields`);
      return; // An unknown name is reported by the type check, with its place.
    }
    if (node.op === 'call') visitCall(node, node.args[0], node.args[1], bound, macroLevel);
    else if (node.op === 'rcall') visitMethod(node, bound, macroLevel);
    else for (const child of children(node)) visit(child, bound, macroLevel);
  };

  const visitCall = (
    node: ASTNode,
    name: string,
    args: ASTNode[],
    bound: ReadonlySet<string>,
    level: number,
  ) => {
    if (!allowedCelCalls.has(name) && !ownCalls.has(name)) refuse(node, unknownCall(name));
    for (const argument of args) visit(argument, bound, level);
  };

  const visitMethod = (
    node: Extract<ASTNode, { op: 'rcall' }>,
    bound: ReadonlySet<string>,
    level: number,
  ): void => {
    const [name, receiver, args] = node.args;
    if (!macroCalls.has(name)) {
      visitCall(node, name, [receiver, ...args], bound, level);
      return;
    }
    if (level >= expressionLimits.macroLevels) {
      refuse(node, `${name}() stands too deep inside others: derive a field for the inner part`);
    }
    if (!isBoundedList(receiver)) {
      refuse(receiver, `${name}() must go over a field, a short list, or the result of filter() or map()`);
    }
    visit(receiver, bound, level);
    const [variable, ...bodies] = args;
    const inner = new Set(bound);
    if (variable?.op === 'id') inner.add(variable.args);
    for (const body of bodies) visit(body, inner, level + 1);
  };

  visit(root, new Set(), 0);
  return { dependencies: [...dependencies], problems };
}

function unknownCall(name: string): string {
  if (name === 'matches') return 'matches() is not available here: give the field a pattern instead';
  const known = [...ownCalls, ...allowedCelCalls, ...macroCalls].join(', ');
  return `${name}() is not available here; there are ${known}`;
}

/** Lists joined with + would let two levels of macros grow beyond any bound. */
function isBoundedList(node: ASTNode): boolean {
  if (node.op === 'rcall')
    return (node.args[0] === 'filter' || node.args[0] === 'map') && isBoundedList(node.args[1]);
  return node.op === 'id' || node.op === '.' || node.op === 'list';
}

/** `a`, `a.b`, `a["b"]` as their names; nothing for names that a macro bound. */
function fieldPath(node: ASTNode, bound: ReadonlySet<string>): string[] | undefined {
  if (node.op === 'id') return bound.has(node.args) ? undefined : [node.args];
  if (node.op === '.') {
    const path = fieldPath(node.args[0], bound);
    return path && [...path, node.args[1]];
  }
  if (node.op === '[]' && node.args[1].op === 'value' && typeof node.args[1].args === 'string') {
    const path = fieldPath(node.args[0], bound);
    return path && [...path, node.args[1].args];
  }
  return undefined;
}

function resolve(path: string[], variables: ExpressionVariables): { leaf?: string; group?: string } {
  let here: ExpressionVariables = variables;
  for (const [index, name] of path.entries()) {
    const next = Object.hasOwn(here, name) ? here[name] : undefined;
    if (next === undefined) return {};
    if (typeof next === 'string') return { leaf: path.slice(0, index + 1).join('.') };
    here = next;
  }
  return { group: path.join('.') };
}

/** The nodes below a node, whatever its shape. */
export function children(node: ASTNode): ASTNode[] {
  const found: ASTNode[] = [];
  const gather = (part: unknown): void => {
    if (Array.isArray(part)) part.forEach(gather);
    else if (typeof part === 'object' && part !== null && 'op' in part) found.push(part as ASTNode);
  };
  gather(node.args);
  return found;
}
