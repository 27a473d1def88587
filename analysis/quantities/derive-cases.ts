import type { Caution } from '../cautions/cautions.ts';
import type { GivenInput } from './inputs.ts';
import { InputError } from './input-error.ts';
import { derive } from './registry.ts';
import { DomainError, UnitError } from '../units/errors.ts';

/** Answer to one case of a batch: a value with its cautions, or what was wrong and the way out. */
export type CaseAnswer =
  | {
      readonly id: unknown;
      readonly value: number;
      readonly unit: string;
      readonly cautions: readonly Caution[];
    }
  | { readonly id: unknown; readonly error: CaseError };

interface CaseError {
  readonly code: string;
  readonly message: string;
  readonly argument?: string;
  readonly remedy: string;
}

/** Derives each `{ id, quantity, inputs }`, order kept; a bad case is answered with its error and stops no other. */
export function deriveCases(cases: readonly unknown[]): CaseAnswer[] {
  return cases.map((each) => {
    const { id = null, quantity, inputs } = isRecord(each) ? each : {};
    if (typeof quantity !== 'string' || !isRecord(inputs)) {
      const message = 'The case is no object with id, quantity and inputs.';
      return {
        id,
        error: { code: 'invalid_case', message, remedy: 'Write { "id", "quantity", "inputs": { … } }.' },
      };
    }
    try {
      return { id, ...derive(quantity, inputs as Record<string, GivenInput>) };
    } catch (error) {
      return { id, error: errorOf(error) };
    }
  });
}

function errorOf(error: unknown): CaseError {
  if (!(error instanceof DomainError || error instanceof UnitError || error instanceof InputError))
    throw error;
  const { code, message, argument, remedy } = error;
  return { code, message, ...(argument !== undefined && { argument }), remedy };
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}
