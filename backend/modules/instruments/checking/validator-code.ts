import { compileSchemaValidatorsCode } from '@rjsf/validator-ajv8/compileSchemaValidators';
import { Ajv2020 } from 'ajv/dist/2020.js';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { sharedAjvOptions } from './instrument-ajv.ts';
import { linearRegExp } from './linear-regexp.ts';

/**
 * Makes the module with which the browser validates an instrument's form under `script-src 'self'`.
 *
 * The schema must have passed `checkInstrument`: the code runs in other users' browsers. It exports a function that
 * takes `require` for the names `ajv/dist/runtime/ucs2length`, `ajv/dist/runtime/equal`, `ajv-formats/dist/formats`
 * and `linear-regexp`, and returns the validators. It answers only for a schema deeply equal to this one.
 */
export function validatorCode(schema: InstrumentSchema): string {
  const code = compileSchemaValidatorsCode(schema as Parameters<typeof compileSchemaValidatorsCode>[0], {
    AjvClass: Ajv2020,
    ajvOptionsOverrides: { ...sharedAjvOptions, code: { source: true, lines: true, regExp: linearRegExp } },
  });
  return `export default (require) => { const exports = {};\n${code}\nreturn exports; };`;
}
