import type { ReactNode } from 'react';
import type { ShownProtocol } from '#schemas/api/protocol.ts';
import { DataTable, type Column } from '#frontend/components/data-table.tsx';
import { Caution } from '#frontend/components/caution.tsx';
import { HiddenValue } from '#frontend/components/pen-mark.tsx';
import { cautionClosing } from '#schemas/vocabulary/caution-texts.ts';
import type { VisitType } from '#schemas/protocol/protocol.ts';
import { dayInWords, designWords } from '../model/protocol-words.ts';
import { VisitLineChart } from './visit-line-chart.tsx';

const visitColumns: Column<VisitType>[] = [
  { header: 'Visit', cell: ({ label }) => label },
  { header: 'Target day', cell: ({ targetDay }) => dayInWords(targetDay), numeric: true },
  { header: 'Days early', cell: ({ windowBefore }) => windowBefore, numeric: true },
  { header: 'Days late', cell: ({ windowAfter }) => windowAfter, numeric: true },
  { header: 'Period', cell: ({ period }) => period ?? '–', numeric: true },
  { header: 'Steps', cell: ({ runSheet }) => runSheet.length, numeric: true },
];

/** Design, conditions, sequences, allocation, sites, visits and safety limits: the protocol at a glance. */
export function ProtocolOverview({ content }: { content: ShownProtocol }) {
  const { conditions, sequences, sites, allocation, visitTypes, safetyLimits, participantLogs } = content;
  const labelOf = (key: string): string =>
    conditions.find((condition) => condition.key === key)?.label ?? key;
  return (
    <div className="flex flex-col gap-6 p-4">
      <dl className="grid gap-x-8 gap-y-3 sm:grid-cols-2 xl:grid-cols-3">
        <Fact name="Design">{designWords[content.design]}</Fact>
        <Fact name="Planned participants">{content.plannedParticipants}</Fact>
        <Fact name="Conditions">{conditions.map(({ label }) => label).join(' · ')}</Fact>
        <Fact name="Sequences">
          <ul>
            {sequences.map(({ key, label, conditions: given }) => (
              <li key={key}>{given.length > 1 ? given.map(labelOf).join(', then ') : label}</li>
            ))}
          </ul>
        </Fact>
        {content.washoutDays !== undefined && <Fact name="Washout">{content.washoutDays} days at least</Fact>}
        {content.design !== 'single-group' && (
          <Fact name="Allocation">
            Permuted blocks{allocation.stratifyBySite ? ', stratified by site' : ''}.{' '}
            {allocation.blockSizes === null ? (
              <HiddenValue word="block sizes · hidden from who enrols or assesses" />
            ) : (
              `Block sizes ${allocation.blockSizes.join(', ')}.`
            )}
          </Fact>
        )}
        <Fact name="Sites">{sites.join(', ')}</Fact>
        <Fact name="Participants’ logs">
          {participantLogs.map(({ label }) => label).join(', ') || 'none'}
        </Fact>
        <Fact name="Reasons for a missed visit">{content.missedVisitReasons.join(', ')}</Fact>
      </dl>
      <section className="flex flex-col gap-3">
        <h2 className="text-base">Visits</h2>
        <VisitLineChart visitTypes={visitTypes} />
        <div className="rounded border">
          <DataTable
            caption="Visits"
            captionHidden
            columns={visitColumns}
            query={{ data: visitTypes, error: null, refetch: () => undefined }}
            rowKey={({ key }) => key}
            empty={{ title: 'No visit' }}
          />
        </div>
      </section>
      {safetyLimits.length > 0 && (
        <section className="flex flex-col gap-3">
          <h2 className="text-base">Safety limits</h2>
          {safetyLimits.map(({ key, label, text }) => (
            <Caution key={key} title={label}>
              {text}
            </Caution>
          ))}
          <p className="text-sm text-ink-soft">{cautionClosing}</p>
        </section>
      )}
    </div>
  );
}

function Fact({ name, children }: { name: string; children: ReactNode }) {
  return (
    <div>
      <dt className="text-sm text-ink-soft">{name}</dt>
      <dd>{children}</dd>
    </div>
  );
}
