import { useMemo } from 'react';
import type { VersionDto } from '#schemas/api/instruments.ts';
import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import { InstrumentForm } from '#frontend/forms/instrument-form.tsx';
import { validatorUrl } from '../api/instruments.ts';
import { library } from '../model/library.ts';

const noValues = {};
const ignore = () => undefined;

/** A published version as a blank form, with what ties a paper copy to it (IV-11). */
export function PublishedForm({ studyCode, version }: { studyCode: string; version: VersionDto }) {
  const compiled = useMemo(() => compilePublished(version.schema, library), [version.schema]);
  return (
    <>
      <InstrumentForm
        schema={version.schema}
        compiled={compiled}
        values={noValues}
        onOperation={ignore}
        readOnly
        validatorUrl={validatorUrl(studyCode, version.hash)}
      />
      <p className="mt-4 border-t pt-2 text-sm text-ink-soft">
        {version.title}, version {version.version} ·{' '}
        <span className="font-mono break-all">{version.hash}</span>
      </p>
    </>
  );
}
