import { useState } from 'react';
import type { VerdictDto } from '#schemas/api/instruments.ts';
import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import type { SampleEntry } from '#schemas/instruments/instrument.ts';
import { PaneTabs } from '#frontend/components/pane-tabs.tsx';
import { ProblemList } from '#frontend/components/problem-list.tsx';
import { FailedState, Skeleton } from '#frontend/components/states.tsx';
import { DifferenceTable } from './difference-table.tsx';
import { SampleTable } from './sample-table.tsx';

interface DraftDrawerProps {
  verdict: VerdictDto | undefined;
  error: Error | null;
  current: boolean;
  baseVersion: number | null;
  samples: readonly SampleEntry[];
  derived: readonly CompiledField[];
  onSamples: (samples: SampleEntry[]) => void;
  onLoad: (sample: SampleEntry) => void;
  onKeep: () => void;
  onGoTo: (pointer: string) => void;
}

/** Below the table: what is wrong, what samples come to, what changes against the last version. */
export function DraftDrawer(props: DraftDrawerProps) {
  const { verdict, error, current, baseVersion, samples, derived } = props;
  const [chosen, setChosen] = useState('problems');
  if (verdict === undefined) {
    return (
      <section className="rounded border bg-paper">
        {error ? <FailedState error={error} /> : <Skeleton lines={3} label="Being checked" />}
      </section>
    );
  }
  const failing = verdict.samples.filter(({ passed }) => !passed).length;
  return (
    <section aria-label="Checks, samples, changes" className="rounded border bg-paper">
      <PaneTabs
        label="Checks, samples, changes"
        chosen={chosen}
        onChoose={setChosen}
        panes={[
          {
            key: 'problems',
            label: `Problems (${verdict.problems.length})`,
            content: (
              <div className="p-4" aria-busy={!current}>
                <ProblemList problems={verdict.problems} onGoTo={({ pointer }) => props.onGoTo(pointer)} />
              </div>
            ),
          },
          {
            key: 'samples',
            label: `Samples (${samples.length}${failing > 0 ? `, ${failing} not as said` : ''})`,
            content: (
              <SampleTable
                samples={samples}
                results={verdict.samples}
                derived={derived}
                onChange={props.onSamples}
                onLoad={props.onLoad}
                onKeep={props.onKeep}
              />
            ),
          },
          {
            key: 'changes',
            label: baseVersion === null ? 'Changes' : `Changes (${verdict.differences.length})`,
            content: (
              <DifferenceTable
                query={{ data: verdict.differences, error: null, refetch: () => undefined }}
                empty={
                  baseVersion === null
                    ? 'There is no version to compare with yet'
                    : 'No field differs from the newest version'
                }
              />
            ),
          },
        ]}
      />
    </section>
  );
}
