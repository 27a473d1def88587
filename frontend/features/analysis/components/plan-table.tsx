import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { PlanDto } from '#schemas/api/analysis.ts';
import { DataTable, type Column } from '../../../components/data-table.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { shortHash } from '../../../lib/format/numbers.ts';
import { plansQuery, planVersionsQuery, type SignedPlan } from '../api/analysis.ts';

/** The plans that are being written. */
export function PlanDraftTable({ study }: { study: string }) {
  const query = useQuery(plansQuery(study));
  const columns: Column<PlanDto>[] = [
    {
      header: 'Plan',
      cell: ({ id, name }) => (
        <Link to={`/studies/${study}/plans/${id}`} className="font-semibold">
          {name}
        </Link>
      ),
    },
    {
      header: 'State',
      cell: ({ problems }) =>
        problems.length === 0 ? (
          <StateMark state="settled" word="can be signed" />
        ) : (
          <StateMark
            state="asks"
            word={problems.length === 1 ? '1 open point' : `${problems.length} open points`}
          />
        ),
    },
    {
      header: 'Signed',
      cell: ({ versions: [newest] }) =>
        newest === undefined ? 'not yet' : `version ${newest.version}, ${formatMoment(newest.signedAt)}`,
    },
    { header: 'Written by', cell: ({ author }) => author },
  ];
  return (
    <DataTable
      caption="Being written"
      name="plan-drafts"
      columns={columns}
      query={query}
      rowKey={({ id }) => id}
      empty={{
        title: 'No plan yet',
        children: <p>A new plan begins with what the protocol settles.</p>,
      }}
    />
  );
}

/** Signed plans; they never change. */
export function SignedPlanTable({ study }: { study: string }) {
  const query = useQuery(planVersionsQuery(study));
  const columns: Column<SignedPlan>[] = [
    {
      header: 'Plan',
      cell: ({ id, name, version }) => (
        <Link to={`/studies/${study}/plans/signed/${id}`} className="font-semibold">
          {name}, version {version}
        </Link>
      ),
    },
    { header: 'Signed by', cell: ({ signedBy }) => signedBy },
    { header: 'Signed', cell: ({ signedAt }) => formatMoment(signedAt) },
    { header: 'The study was', cell: ({ studyStateThen }) => studyStateThen.replace('-', ' ') },
    {
      header: 'SHA-256',
      cell: ({ hash }) => (
        <span className="font-mono text-xs" title={hash}>
          {shortHash(hash)}
        </span>
      ),
    },
  ];
  return (
    <DataTable
      caption="Signed"
      name="signed-plans"
      sortParam="signed-sort"
      columns={columns}
      query={query}
      rowKey={({ id }) => id}
      empty={{
        title: 'No plan has been signed yet',
        children: <p>A plan signed while the study runs counts as planned; later it is post hoc.</p>,
      }}
    />
  );
}
