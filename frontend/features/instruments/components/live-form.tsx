import { useMemo } from 'react';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { InstrumentForm } from '#frontend/forms/instrument-form.tsx';
import { validatorUrl } from '../api/instruments.ts';
import { tried, withOperation, type Trial } from '../model/trial.ts';

interface LiveFormProps {
  studyCode: string;
  compiled: CompiledInstrument;
  hash: string;
  trial: Trial;
  onTrial: (change: (trial: Trial) => Trial) => void;
}

/** The very form that coordinators will see, with derived values and checks; what is typed here is only tried. */
export function LiveForm({ studyCode, compiled, hash, trial, onTrial }: LiveFormProps) {
  const { values, findings } = useMemo(() => tried(compiled, trial), [compiled, trial]);
  return (
    <InstrumentForm
      schema={compiled.schema}
      compiled={compiled}
      values={values}
      findings={findings}
      onOperation={(operation) => onTrial((before) => withOperation(before, operation))}
      validatorUrl={validatorUrl(studyCode, hash)}
    />
  );
}
