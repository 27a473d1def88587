import type { Expression } from '../expressions/expression.ts';
import type { ExpressionVariables } from '../expressions/expression-types.ts';
import type { Level } from '../vocabulary/states.ts';
import type {
  InstrumentProblem,
  InstrumentSchema,
  QuantityInput,
  ReadingsRule,
  Visibility,
} from './instrument.ts';

/** An instrument version read once: what everything that shows, checks or computes its values asks. */
export interface CompiledInstrument {
  key: string;
  title: string;
  schema: InstrumentSchema;
  /** In reading order, derived ones included. */
  fields: CompiledField[];
  field: (pointer: string) => CompiledField | undefined;
  /** In an order in which each finds its inputs computed. */
  derivations: CompiledDerivation[];
  checks: CompiledCheck[];
  /** Pointer → what the field reveals, with `identifying` and `unblinding` spread to all that comes from a field. */
  visibility: Record<string, Visibility>;
  cautions: string[];
  /** What an author should know: nothing here stops publication. */
  warnings: InstrumentProblem[];
  variables: ExpressionVariables;
}

export interface CompiledField {
  pointer: string;
  /** The name in expressions: `field` or `group.field`. */
  variable: string;
  label: string;
  description?: string;
  type: 'number' | 'integer' | 'string' | 'boolean' | 'choices';
  unit?: string;
  /** The choices of an `enum`, with their words. */
  choices?: { value: string | number | boolean; label: string }[];
  format?: 'date' | 'date-time';
  readings?: CompiledReadings;
  required: boolean;
  conditional: boolean;
  derived: boolean;
  source: boolean;
  missingReasons: string[];
  testCode?: string;
  visibility: Visibility;
  level: Level;
  schemaPointer: string;
}

export interface CompiledReadings extends ReadingsRule {
  discardFirst: number;
  rejectionReasons: string[];
  /** The most boxes there can be, replacements and extra readings included. */
  most: number;
  /** Pointers of the fields read in the same act, this one included. */
  partners: string[];
}

export interface CompiledDerivation {
  pointer: string;
  /** Pointers of the fields it reads. */
  inputs: string[];
  /** Those of them without which it is computed all the same. */
  optional: string[];
  rule: DerivationRule;
  level: Level;
}

/** How a derived value is computed. */
type DerivationRule =
  | { kind: 'expression'; expression: Expression }
  | { kind: 'quantity'; quantity: string; version: string; inputs: Record<string, QuantityInput> };

export interface CompiledCheck {
  id: string;
  severity: 'hard' | 'soft';
  message: string;
  expression: Expression;
  /** Pointers that the expression reads. */
  inputs: string[];
  /** Pointers that it reads or at which its message stands. */
  pointers: string[];
  readings: 'counted' | 'entered';
  opensQuery: boolean;
  /** A check on a hidden field is raised to, and answered by, unblinded members only. */
  level: Level;
}
