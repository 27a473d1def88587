/** What a field is inside an expression. Readings are the list of those that count. */
export type ExpressionType = 'double' | 'int' | 'string' | 'bool' | 'list<double>' | 'list<string>';

/** The names an expression may use: fields, and groups of fields read as `group.field`. */
export interface ExpressionVariables {
  [name: string]: ExpressionType | ExpressionVariables;
}

/** Values for the names of an expression, nested as its variables are. */
export interface ExpressionScope {
  [name: string]: number | string | boolean | number[] | string[] | ExpressionScope;
}

/** What is wrong with an expression and what to write instead; positions count characters of its text. */
export interface ExpressionProblem {
  message: string;
  start: number;
  end: number;
}

/** Bounds on what an author may write (WS-10). */
export const expressionLimits = {
  characters: 2000,
  nodes: 500,
  depth: 40,
  listElements: 60,
  /** `all` inside `all` is as deep as it goes. */
  macroLevels: 2,
} as const;
