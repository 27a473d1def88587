import type { RJSFSchema, ValidatorType } from '@rjsf/utils';
import createPrecompiledValidator from '@rjsf/validator-ajv8/lib/createPrecompiledValidator.js';
import { fullFormats } from 'ajv-formats/dist/formats.js';
import equal from 'ajv/dist/runtime/equal.js';
import ucs2length from 'ajv/dist/runtime/ucs2length.js';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import type { SchemaError } from '#schemas/instruments/schema-error.ts';

type Require = (name: string) => unknown;
interface ValidateFunction {
  (document: unknown): boolean;
  errors?: SchemaError[] | null;
}
type Validators = Record<string, ValidateFunction>;

export interface FormValidator {
  /** For the form library: which conditions hold. */
  structure: ValidatorType;
  /** All that is wrong with a document by the schema alone. */
  errorsOf: (document: unknown) => SchemaError[];
}

/**
 * Fetches the validator that the server compiled for exactly this schema. It is a script of our own origin, which
 * the policy `script-src 'self'` lets run, where Ajv itself would need `eval`.
 */
export async function loadValidator(url: string, schema: InstrumentSchema): Promise<FormValidator> {
  const [{ default: make }, linear] = await Promise.all([
    import(/* @vite-ignore */ url) as Promise<{ default: (require: Require) => Validators }>,
    // The engine weighs half as much as the form, and few instruments have patterns.
    JSON.stringify(schema).includes('"pattern"') ? import('./linear-regexp.ts') : undefined,
  ]);
  const runtime: Record<string, unknown> = {
    'ajv/dist/runtime/ucs2length': { default: defaultOf(ucs2length) },
    'ajv/dist/runtime/equal': { default: defaultOf(equal) },
    'ajv-formats/dist/formats': { fullFormats },
    'linear-regexp': { default: linear?.linearRegExp },
  };
  return formValidator(
    make((name) => {
      if (!(name in runtime))
        throw new Error(`The validator asks for ${name}, which this client does not have`);
      return runtime[name];
    }),
    schema,
  );
}

function formValidator(validators: Validators, schema: InstrumentSchema): FormValidator {
  const root = schema as unknown as RJSFSchema;
  const structure = createPrecompiledValidator(validators as never, root);
  return {
    structure,
    errorsOf: (document) => (structure.rawValidation(root, document).errors ?? []) as SchemaError[],
  };
}

/** CommonJS modules arrive wrapped or not, depending on the bundler. */
function defaultOf(module: unknown): unknown {
  return typeof module === 'function' ? module : (module as { default: unknown }).default;
}

/** Without a validator every conditional field is shown: nothing is hidden that might be needed. */
export const withoutValidator: FormValidator = {
  structure: {
    isValid: () => true,
    validateFormData: () => ({ errors: [], errorSchema: {} }),
    rawValidation: () => ({ errors: [] }),
  },
  errorsOf: () => [],
};
