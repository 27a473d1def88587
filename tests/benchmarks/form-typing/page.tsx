import Form from '@rjsf/core';
import type { RJSFSchema } from '@rjsf/utils';
import { customizeValidator } from '@rjsf/validator-ajv8';
import { Ajv2020 } from 'ajv/dist/2020.js';
import { useState } from 'react';
import { createRoot } from 'react-dom/client';
import { compileInstrument } from '#schemas/instruments/compile-instrument.ts';
import { ValidatedForm } from '#frontend/forms/instrument-form.tsx';
import { formOf400Fields } from './instrument.ts';
import '#frontend/styles.css';

const schema = formOf400Fields();
const compiled = compileInstrument(schema, { get: () => undefined });
if ('problems' in compiled) throw new Error(JSON.stringify(compiled.problems));
const rjsfValidator = customizeValidator({ AjvClass: Ajv2020, ajvOptionsOverrides: { strict: false } });
const validate = new Ajv2020({ strict: false, allErrors: true }).compile(schema);
const validator = {
  structure: rjsfValidator,
  errorsOf: (document: unknown) => (validate(document) ? [] : (validate.errors ?? [])),
};
const noValues = {};
/** The library draws a reading only where one stands. */
const blankRows = Object.fromEntries(
  Object.keys(schema.properties)
    .filter((name) => name.startsWith('row'))
    .map((name) => [name, [null, null, null, null, null]]),
);
const ignore = () => undefined;

/** The library alone, with every value in its own state: what the product's form is compared with. */
function PlainForm() {
  const [formData, setFormData] = useState<unknown>(blankRows);
  return (
    <Form<unknown, RJSFSchema>
      schema={schema}
      validator={rjsfValidator}
      formData={formData}
      noHtml5Validate
      noValidate
      showErrorList={false}
      onChange={(event) => setFormData(event.formData)}
    />
  );
}

const plain = new URLSearchParams(location.search).has('plain');
createRoot(document.getElementById('root')!).render(
  plain ? (
    <PlainForm />
  ) : (
    <ValidatedForm
      schema={schema}
      compiled={compiled}
      values={noValues}
      onOperation={ignore}
      validator={validator}
    />
  ),
);
