import { Ajv2020 } from 'ajv/dist/2020.js';
import addFormatsModule from 'ajv-formats';
import { ownInstrumentKeywords } from '#schemas/instruments/meta-schema.ts';
import { linearRegExp } from './linear-regexp.ts';

const addFormats = addFormatsModule as unknown as (ajv: Ajv2020) => void;

/** Options that the browser's validator and the server's share, so that both judge alike (IV-08). */
export const sharedAjvOptions = {
  allErrors: true,
  verbose: false,
  multipleOfPrecision: 8,
  strictNumbers: true,
} as const;

/** An Ajv for instruments: 2020-12, strict, our annotations known, formats asserted, patterns in linear time. */
export function instrumentAjv(): Ajv2020 {
  const ajv = new Ajv2020({
    ...sharedAjvOptions,
    strict: true,
    // Conditions (`then: { required: […] }`) name fields that are declared outside them.
    strictRequired: false,
    strictTypes: false,
    code: { regExp: linearRegExp },
  });
  addFormats(ajv);
  ajv.addVocabulary([...ownInstrumentKeywords]);
  return ajv;
}
