import type { ErrorObject, ValidateFunction } from 'ajv';
import { parseAddress } from '#schemas/instruments/address.ts';
import type { Finding } from '#schemas/instruments/check-values.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { toDocument } from '#schemas/instruments/document.ts';
import { isMissing, type EntryValue, type EntryValues } from '#schemas/instruments/entry-values.ts';
import { expandFields } from '#schemas/instruments/expand-fields.ts';
import type { FieldSchema } from '#schemas/instruments/instrument.ts';
import { describeSchemaError, type SchemaError } from '#schemas/instruments/schema-error.ts';
import { instrumentAjv } from './instrument-ajv.ts';

/** Judges values by an instrument's schema: the server's word, which is final. */
export interface InstanceValidator {
  /** One value, while the entry is open. */
  field(address: string, value: EntryValue): Finding[];
  /** The whole entry, on completion. Values with a missing reason satisfy `required`. */
  document(values: EntryValues): Finding[];
}

export function instanceValidator(compiled: CompiledInstrument): InstanceValidator {
  const ajv = instrumentAjv();
  const wholeEntry = ajv.compile(compiled.schema);
  const schemas = new Map(
    expandFields(compiled.schema).fields.map(({ pointer, schema }) => [pointer, schema]),
  );
  const compiledFields = new Map<string, ValidateFunction>();

  const validatorOf = (pointer: string, ofReading: boolean): ValidateFunction | undefined => {
    const key = ofReading ? `${pointer}/items` : pointer;
    const known = compiledFields.get(key);
    const schema = schemas.get(pointer);
    const part: FieldSchema | undefined = ofReading ? schema?.items : schema;
    if (known || !part) return known;
    const validate = ajv.compile({ ...part, $defs: compiled.schema.$defs ?? {} });
    compiledFields.set(key, validate);
    return validate;
  };

  return {
    field(text, value) {
      const address = parseAddress(text);
      if (!address || address.rejected || isMissing(value)) return [];
      const validate = validatorOf(address.pointer, address.reading !== undefined);
      if (!validate || validate(value)) return [];
      const errors = (validate.errors ?? []).map((error) => ({ ...schemaError(error), instancePath: text }));
      return errors.flatMap((error) => describeSchemaError(compiled, error) ?? []);
    },
    document(values) {
      const { document, addressOf } = toDocument(compiled, values);
      if (wholeEntry(document)) return [];
      return (wholeEntry.errors ?? [])
        .flatMap((error) => describeSchemaError(compiled, schemaError(error), addressOf) ?? [])
        .filter(({ checkId, pointers }) => checkId !== 'required' || !isMissing(values[pointers[0] ?? '']));
    },
  };
}

function schemaError({ keyword, instancePath, params }: ErrorObject): SchemaError {
  return { keyword, instancePath, params: params as Record<string, unknown> };
}
