import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { quantityNamed } from '#analysis/quantities/registry.ts';
import { sameDimension } from '#analysis/units/convert.ts';
import type { EntryDto, FindingDto, Operation } from '#schemas/api/capture.ts';
import { parseAddress } from '#schemas/instruments/address.ts';
import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { quantityLibrary } from '#schemas/instruments/quantity-library.ts';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { Button } from '../../../components/button.tsx';
import { ErrorSummary } from '../../../components/error-summary.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { FailedState, Skeleton } from '../../../components/states.tsx';
import { InstrumentForm } from '../../../forms/instrument-form.tsx';
import { shortHash } from '../../../lib/format/numbers.ts';
import { say } from '../../../lib/notices.ts';
import { useMay } from '../../../lib/session/ability.ts';
import { useActing } from '../../../lib/session/session.ts';
import { instrumentQuery, useEntryAct, type InstrumentVersion } from '../api/entries.ts';
import { laidOver } from '../model/laid-over.ts';
import { CompletionAnswers } from './completion-answers.tsx';
import { ConflictDialog } from './conflict-dialog.tsx';
import { HistoryDialog } from './history-dialog.tsx';
import { SaveLine } from './save-line.tsx';
import { useEntrySaver } from './use-entry-saver.ts';

const library = quantityLibrary(quantityNamed, sameDimension);

interface EntryEditorProps {
  study: string;
  entry: EntryDto;
  zone: string;
  siteId: string;
}

/** One entry: its form, and around it what may be done with it. */
export function EntryEditor(props: EntryEditorProps) {
  const { study, entry } = props;
  const query = useQuery(instrumentQuery(study, entry.instrument.versionId));
  if (query.data === undefined) {
    return query.error ? (
      <FailedState error={query.error} onRetry={() => void query.refetch()} />
    ) : (
      <Skeleton lines={8} label="Loading the form" />
    );
  }
  return <LoadedEditor key={entry.id} {...props} version={query.data} />;
}

function LoadedEditor({
  study,
  entry,
  zone,
  siteId,
  version,
}: EntryEditorProps & { version: InstrumentVersion }) {
  const may = useMay();
  const compiled = useMemo(() => compilePublished(version.schema, library), [version]);
  const { saver, state, handleOperation } = useEntrySaver(study, entry);
  const [correction, setCorrection] = useState<Map<string, Operation> | null>(null);
  const [dialog, setDialog] = useState<'compare' | 'history' | 'void' | 'correct' | null>(null);
  const act = useEntryAct(study, entry);
  const { role, studyState, sites } = useActing();
  // The server decides; this shows what it would allow: own step, own site, a study that is not locked.
  const own =
    may('update', 'Entry') &&
    entry.performedBy === role &&
    studyState === 'running' &&
    sites.some(({ id }) => id === siteId);
  const editing = (entry.state === 'open' && own) || correction !== null;
  const findings = [...entry.findings, ...asFindings(state.refused)];

  const unsaved = correction === null ? saver.unsaved() : [...correction.values()];
  const shown = laidOver({ ...entry.values, ...entry.derived }, unsaved);

  const handleChange = (operation: Operation): void => {
    if (correction === null) handleOperation(operation);
    else setCorrection(new Map(correction).set(keyOf(operation), operation));
  };
  const handleConfirm = (finding: FindingDto, reason: string): void => {
    const refused = state.refused.filter(({ checkId }) => checkId === finding.checkId);
    const operations = refused.flatMap(({ pointer }) => saver.lastAt(pointer) ?? []);
    saver.confirm(finding.checkId, reason, operations);
  };

  return (
    <section
      aria-labelledby="entry-title"
      className="rounded-md flex min-w-0 flex-col border border-rule bg-paper"
    >
      <header className="flex flex-wrap items-baseline gap-x-3 gap-y-1 px-4 pt-4">
        <h2 id="entry-title" className="text-lg">
          {version.title}
        </h2>
        <span className="text-sm text-ink-soft">
          version {version.version} · <span className="font-mono">{shortHash(version.hash)}</span>
        </span>
        <StateMark className="ml-auto" {...stateLook(entry)} />
      </header>
      <div className="flex flex-col gap-4 p-4">
        {act.error !== null && <ErrorSummary error={act.error} />}
        {entry.state === 'open' && (
          <CompletionAnswers
            error={act.error}
            onAnswer={(confirmations) =>
              act.mutate({ revision: state.revision, path: 'completion', body: { confirmations } })
            }
          />
        )}
        <InstrumentForm
          schema={version.schema}
          compiled={compiled}
          values={shown}
          onOperation={handleChange}
          findings={findings}
          onConfirm={handleConfirm}
          readOnly={!editing}
          validatorUrl={`/api/v1/studies/${study}/instruments/validators/${version.hash}.js`}
          zone={zone}
        />
        <div className="flex flex-wrap gap-3 print:hidden">
          {entry.state === 'open' && own && (
            <Button
              variant="primary"
              large
              busy={act.isPending}
              disabled={state.waiting > 0}
              onClick={() =>
                act.mutate(
                  { revision: state.revision, path: 'completion', body: {} },
                  { onSuccess: () => say(`${version.title}: complete`) },
                )
              }
            >
              Complete this entry
            </Button>
          )}
          {entry.state === 'complete' && own && correction === null && (
            <Button onClick={() => setCorrection(new Map())}>Correct</Button>
          )}
          {correction !== null && (
            <>
              <Button variant="primary" disabled={correction.size === 0} onClick={() => setDialog('correct')}>
                Save the correction
              </Button>
              <Button onClick={() => setCorrection(null)}>Leave as it was</Button>
            </>
          )}
          <Button variant="quiet" onClick={() => setDialog('history')}>
            History
          </Button>
          {entry.state !== 'void' && own && (
            <Button variant="quiet" onClick={() => setDialog('void')}>
              Void this entry
            </Button>
          )}
        </div>
      </div>
      {entry.state === 'open' && own && (
        <SaveLine state={state} zone={zone} onCompare={() => setDialog('compare')} />
      )}
      {dialog === 'compare' && (
        <ConflictDialog
          conflicts={state.conflicts}
          labelOf={(address) => labelOf(compiled, address)}
          zone={zone}
          saver={saver}
          onClose={() => setDialog(null)}
        />
      )}
      {dialog === 'history' && (
        <HistoryDialog
          study={study}
          entry={entry}
          compiled={compiled}
          zone={zone}
          onClose={() => setDialog(null)}
        />
      )}
      {dialog === 'void' && (
        <ActDialog
          title={`Void ${version.title}`}
          act="Void the entry"
          consequences={
            <p>
              The entry stays readable for ever, struck out, and leaves the analysis. It cannot be opened
              again; the step can be filled in anew.
            </p>
          }
          reasons={['wrong participant', 'wrong step', 'measured with a faulty device']}
          onAct={({ reason }) =>
            act.mutateAsync({ revision: entry.revision, path: 'voiding', body: { reason } })
          }
          onClose={() => setDialog(null)}
        />
      )}
      {dialog === 'correct' && correction !== null && (
        <ActDialog
          title={`Correct ${version.title}`}
          act="Correct the entry"
          consequences={
            <>
              <p>
                {correction.size === 1 ? 'One value changes' : `${correction.size} values change`}. The old
                ones stay readable; verification marks on them fall, and a signature shows that it no longer
                covers.
              </p>
              <ul className="list-inside list-disc">
                {[...correction.keys()].map((address) => (
                  <li key={address}>{labelOf(compiled, address)}</li>
                ))}
              </ul>
            </>
          }
          reasons={['typing error', 'read again from source', 'unit mistaken']}
          onAct={async ({ reason }) => {
            const operations = [...correction.values()];
            await act.mutateAsync({
              revision: entry.revision,
              path: 'corrections',
              body: { operations, reason },
            });
            setCorrection(null);
          }}
          onClose={() => setDialog(null)}
        />
      )}
    </section>
  );
}

const keyOf = ({ pointer, rejected }: Operation): string =>
  rejected === undefined ? pointer : `${pointer}!rejected`;

const looks = {
  open: { state: 'underway', word: 'open' },
  complete: { state: 'settled', word: 'complete' },
  void: { state: 'late', word: 'void' },
} as const;

const stateLook = (entry: EntryDto) => looks[entry.state];

/** What a check turned away stands at its field like any other finding. */
const asFindings = (
  refused: readonly { pointer: string; checkId: string; severity: 'hard' | 'soft'; message: string }[],
): FindingDto[] => refused.map(({ pointer, ...rest }) => ({ ...rest, pointers: [pointer] }));

/** "Systolic pressure, reading 2" */
function labelOf(compiled: CompiledInstrument, text: string): string {
  const address = parseAddress(text);
  const label = compiled.field(address?.pointer ?? '')?.label ?? text;
  return address?.reading === undefined ? label : `${label}, reading ${address.reading + 1}`;
}
