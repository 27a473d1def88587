import { Environment, EvaluationError, ParseError, type ParseResult } from '@marcbachmann/cel-js';
import { explainProblem } from './explain-problem.ts';
import {
  expressionLimits,
  type ExpressionProblem,
  type ExpressionScope,
  type ExpressionType,
  type ExpressionVariables,
} from './expression-types.ts';
import { NoAnswer } from './function-bodies.ts';
import { expressionFunctions } from './functions.ts';
import { readSyntax } from './syntax.ts';

/** An expression that was found right, ready to be evaluated any number of times. */
export interface Expression {
  text: string;
  type: ExpressionType;
  /** The fields it reads, as `field` or `group.field`. */
  dependencies: string[];
  /** Evaluates over a scope that holds every dependency. */
  evaluate(scope: ExpressionScope): ExpressionResult;
}

type ExpressionResult = { value: number | string | boolean } | { problem: string };

/** Compiles expressions over one set of names. */
export interface ExpressionCompiler {
  compile(text: string, expected: ExpressionType): Expression | { problems: ExpressionProblem[] };
}

/**
 * CEL (Common Expression Language) wrapped: parsed, bounded, type-checked, with functions of our own.
 * The same code judges in the browser and on the server. Evaluation has no clock of its own: what people wrote
 * is evaluated on the server in a worker with a time limit.
 */
export function expressionCompiler(variables: ExpressionVariables): ExpressionCompiler {
  const environment = environmentFor(variables);
  return { compile: (text, expected) => compile(environment, variables, text, expected) };
}

function compile(
  environment: Environment,
  variables: ExpressionVariables,
  text: string,
  expected: ExpressionType,
): Expression | { problems: ExpressionProblem[] } {
  const whole = { start: 0, end: text.length };
  if (text.length > expressionLimits.characters) {
    return {
      problems: [
        { message: `An expression has at most ${expressionLimits.characters} characters`, ...whole },
      ],
    };
  }
  let program: ParseResult;
  try {
    program = environment.parse(text);
  } catch (error) {
    if (!(error instanceof ParseError)) throw error;
    return { problems: [explainProblem(error, text, variables)] };
  }
  const { dependencies, problems } = readSyntax(program.ast, variables);
  if (problems.length > 0) return { problems };

  const verdict = program.check();
  if (!verdict.valid) return { problems: [explainProblem(verdict.error, text, variables, program.ast)] };
  if (verdict.type !== expected) {
    return { problems: [{ message: wrongResult(verdict.type ?? 'nothing', expected), ...whole }] };
  }
  return { text, type: expected, dependencies, evaluate: (scope) => evaluate(program, variables, scope) };
}

function evaluate(
  program: ParseResult,
  variables: ExpressionVariables,
  scope: ExpressionScope,
): ExpressionResult {
  try {
    const result: unknown = program(celValues(scope, variables));
    const value = typeof result === 'bigint' ? Number(result) : result;
    if (typeof value === 'number' && !Number.isFinite(value)) {
      return {
        problem:
          'the result is not a finite number (a division by zero, or a logarithm or root without a value)',
      };
    }
    return { value: value as number | string | boolean };
  } catch (error) {
    if (error instanceof EvaluationError) return { problem: error.summary };
    if (error instanceof NoAnswer) return { problem: error.message };
    throw error;
  }
}

/** Whole numbers must reach CEL as bigint: a plain number is a double to it. */
function celValues(scope: ExpressionScope, variables: ExpressionVariables): Record<string, unknown> {
  const values: Record<string, unknown> = {};
  for (const [name, value] of Object.entries(scope)) {
    const type = variables[name];
    if (type === 'int' && Number.isInteger(value)) values[name] = BigInt(value as number);
    else if (typeof type === 'object') values[name] = celValues(value as ExpressionScope, type);
    else values[name] = value;
  }
  return values;
}

function wrongResult(type: string, expected: ExpressionType): string {
  if (expected === 'bool') return 'A check must be true or false: compare with <, <=, >, >=, == or !=';
  if (expected === 'double' && type === 'int')
    return 'The result is a whole number: write double(…) around it, or 3.0 for 3';
  if (expected === 'int' && type === 'double')
    return 'The result is a decimal number: write int(…) around it, or give the field type "number"';
  return `The result is ${type}, the field takes ${expected}`;
}

function environmentFor(variables: ExpressionVariables): Environment {
  const environment = baseEnvironment().clone();
  for (const [name, type] of Object.entries(variables)) {
    if (typeof type === 'string') environment.registerVariable(name, type);
    else environment.registerVariable({ name, schema: type });
  }
  return environment;
}

let base: Environment | undefined;

function baseEnvironment(): Environment {
  if (base) return base;
  const { nodes, depth, listElements } = expressionLimits;
  base = new Environment({
    limits: {
      maxAstNodes: nodes,
      maxDepth: depth,
      maxListElements: listElements,
      maxMapEntries: 10,
      maxCallArguments: 8,
    },
  });
  for (const { signature, body } of expressionFunctions) base.registerFunction(signature, body);
  return base;
}
