import { memo, useCallback, useId, useMemo, useSyncExternalStore } from 'react';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { cautionClosing, cautionTexts } from '#schemas/vocabulary/caution-texts.ts';
import { Caution } from '../components/caution.tsx';
import { ErrorState, Skeleton } from '../components/states.tsx';
import { FormEnvironmentContext } from './form-context.ts';
import type { InstrumentFormProps } from './form-props.ts';
import type { FormStore } from './form-store.ts';

export type { InstrumentFormProps } from './form-props.ts';
import { type FormValidator, withoutValidator } from './load-validator.ts';
import { shapeOf, shapingPointers } from './shape.ts';
import { ThemedForm } from './theme.ts';
import { useCommitOnLeaving } from './use-commit-on-leaving.ts';
import { useFormStore } from './use-form-store.ts';
import { useSchemaFindings } from './use-schema-findings.ts';
import { useValidator } from './use-validator.ts';

/** An instrument as a form. The same for coordinators, for the preview at the drafting table and for paper. */
export function InstrumentForm({ validatorUrl, ...props }: InstrumentFormProps) {
  const { validator, error, retry } = useValidator(validatorUrl, props.schema);
  if (error) return <ErrorState error={error} onRetry={retry} />;
  if (!validator) return <Skeleton lines={8} label="Loading the form" />;
  return <ValidatedForm {...props} validator={validator} />;
}

/** The form once its validator is there. */
export function ValidatedForm(
  props: Omit<InstrumentFormProps, 'validatorUrl'> & { validator?: FormValidator },
) {
  const {
    schema,
    compiled,
    findings,
    onConfirm,
    readOnly = false,
    zone,
    validator = withoutValidator,
  } = props;
  const idPrefix = useId();
  const store = useFormStore(props);
  useSchemaFindings(store, validator, findings);
  useCommitOnLeaving(store);

  const environment = useMemo(
    () => ({ store, idPrefix, readOnly, zone, onConfirm }),
    [store, idPrefix, readOnly, zone, onConfirm],
  );
  return (
    <FormEnvironmentContext value={environment}>
      <div className="flex flex-col gap-4">
        <Cautions codes={compiled.cautions} />
        <Fields schema={schema} store={store} idPrefix={idPrefix} validator={validator} />
      </div>
    </FormEnvironmentContext>
  );
}

interface FieldsProps {
  schema: InstrumentSchema;
  store: FormStore;
  idPrefix: string;
  validator: FormValidator;
}

/**
 * The form library's part: it lays out fields, and is told of a value only when the value decides which fields there
 * are. Given every value, @rjsf/core 6.11 compares and walks the whole form on each key: with 400 places to type a key
 * cost 12 ms of script (worst 44 to 80), against 1.3 ms when each field listens to its own address in the store
 * (`tests/benchmarks/form-typing.ts`, Chromium, two shared cores; the limit is 16 ms).
 */
const Fields = memo(function Fields({ schema, store, idPrefix, validator }: FieldsProps) {
  const pointers = useMemo(() => shapingPointers(schema), [schema]);
  const subscribe = useCallback((listener: () => void) => store.subscribeToChanges(listener), [store]);
  const shape = useSyncExternalStore(subscribe, () => JSON.stringify(shapeOf(store, pointers)));
  const formData = useMemo(() => JSON.parse(shape) as Record<string, unknown>, [shape]);
  return (
    <ThemedForm
      tagName="div"
      schema={schema}
      validator={validator.structure}
      formData={formData}
      idPrefix={idPrefix}
      idSeparator="/"
      noValidate
      noHtml5Validate
      showErrorList={false}
      experimental_defaultFormStateBehavior={noDefaults}
    >
      <></>
    </ThemedForm>
  );
});

/** A value is what a person entered: defaults of the schema never become one by themselves. */
const noDefaults = {
  emptyObjectFields: 'skipDefaults',
  arrayMinItems: { populate: 'never' },
  constAsDefaults: 'never',
} as const;

const knownCautions: Record<string, { title: string; text: string } | undefined> = cautionTexts;

function Cautions({ codes }: { codes: readonly string[] }) {
  const texts = codes.flatMap((code) => knownCautions[code] ?? []);
  if (texts.length === 0) return null;
  return (
    <div className="flex flex-col gap-2">
      {texts.map(({ title, text }, at) => (
        <Caution key={title} title={title}>
          {text}
          {at === texts.length - 1 && ` ${cautionClosing}`}
        </Caution>
      ))}
    </div>
  );
}
