import type { EntityManager } from '@mikro-orm/postgresql';
import type { NowItemDto } from '#schemas/api/overview.ts';
import type { Role } from '#schemas/vocabulary/roles.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { currentActor, currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { may } from '#backend/http/authorize.ts';
import { CutSchema, PlanDraftSchema, PlanVersionSchema } from '../analysis/analysis.entity.ts';
import { presentVisits } from '../capture/index.ts';
import { VisitSchema, type Visit } from '../capture/visit.entity.ts';
import { ExportRequestSchema } from '../exports/export-request.entity.ts';
import { verificationOf } from '../monitoring/index.ts';
import { QuerySchema, type Query } from '../monitoring/monitoring.entity.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { signaturesOf } from '../records/index.ts';
import { StudySchema, type Study } from '../studies/study.entity.ts';
import { UnblindingSchema } from '../participants/allocation.entity.ts';

/** The most of each kind; the page itself has all of them. */
const most = 8;

type Source = (em: EntityManager, study: Study) => Promise<NowItemDto[]>;

/** What may wait for each role, asked in this order. */
const sources: Partial<Record<Role, readonly Source[]>> = {
  coordinator: [visitsToRun, queriesToAnswer],
  'unblinded-technician': [visitsUnderWay, queriesToAnswer],
  'study-physician': [queriesToAnswer],
  'principal-investigator': [exportsToDecide, unblindingToConfirm, visitsToSign, queriesToSettle],
  monitor: [visitsToVerify, queriesToSettle],
  statistician: [exportsToTake, unblindingToConfirm, plansToSign, cutToMake],
};

/** Everything that needs the actor now, oldest first. */
export async function waitingFor(em: EntityManager): Promise<NowItemDto[]> {
  const study = await em.findOneOrFail(StudySchema, currentStudyId());
  const items: NowItemDto[] = [];
  for (const source of sources[currentActor().role as Role] ?? []) items.push(...(await source(em, study)));
  return items.sort((a, b) => a.since.localeCompare(b.since));
}

const today = (): string => new Date().toISOString().slice(0, 10);

async function visitsOf(em: EntityManager, condition: object, limit = most) {
  const allowed = accessible('read', 'Visit');
  if (allowed === null) return [];
  const rows = await em.find(
    VisitSchema,
    { $and: [allowed, condition] },
    { orderBy: { plannedOn: 'asc' }, limit },
  );
  return presentVisits(em, rows);
}

async function visitsToRun(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  if (study.state !== 'running') return [];
  const visits = await visitsOf(em, {
    $or: [{ state: 'under-way' }, { state: 'planned', plannedOn: { $lte: today() } }],
  });
  return visits.map((visit) => ({
    kind: visit.overdue ? 'visit-overdue' : 'visit-due',
    since: `${visit.overdue ? visit.windowTo : visit.plannedOn}T00:00:00Z`,
    title: `${visit.participantCode} · ${visit.label}`,
    detail: visit.overdue
      ? `The window closed on ${visit.windowTo}. Run it late, or record it as missed with a reason.`
      : visit.state === 'under-way'
        ? 'The visit is under way.'
        : `Planned for ${visit.plannedOn}, window to ${visit.windowTo}.`,
    href: visit.overdue
      ? `/studies/${study.code}/visits?days=past&state=planned`
      : `/studies/${study.code}/visits/${visit.id}`,
    action: visit.overdue ? 'Decide' : 'Open the run sheet',
  }));
}

async function visitsUnderWay(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  if (study.state !== 'running') return [];
  const visits = await visitsOf(em, { state: 'under-way' });
  return visits.map((visit) => ({
    kind: 'visit-under-way',
    since: visit.startedAt ?? `${visit.plannedOn}T00:00:00Z`,
    title: `${visit.participantCode} · ${visit.label}`,
    detail: 'Steps of the unblinded technician may be waiting.',
    href: `/studies/${study.code}/visits/${visit.id}`,
    action: 'Open the run sheet',
  }));
}

async function visitsToSign(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  if (study.state !== 'running') return [];
  const rows = await em.find(
    VisitSchema,
    { studyId: study.id, state: 'completed' },
    { orderBy: { endedAt: 'desc' }, limit: 40 },
  );
  const waiting: { row: Visit; again: boolean }[] = [];
  for (const row of rows) {
    if (waiting.length >= most) break;
    const signatures = await signaturesOf(em, row);
    if (!signatures.some(({ state }) => state === 'covers'))
      waiting.push({ row, again: signatures.length > 0 });
  }
  const visits = await presentVisits(
    em,
    waiting.map(({ row }) => row),
  );
  return visits.map((visit, at) => ({
    kind: 'visit-to-sign',
    since: visit.endedAt ?? `${visit.plannedOn}T00:00:00Z`,
    title: `${visit.participantCode} · ${visit.label}`,
    detail: waiting[at]?.again
      ? 'Changed after your signature; it needs signing again.'
      : 'Completed, not signed yet.',
    href: `/studies/${study.code}/visits/${visit.id}`,
    action: 'Review and sign',
  }));
}

async function visitsToVerify(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  if (study.state !== 'running') return [];
  const allowed = accessible('read', 'Visit');
  const rows =
    allowed === null
      ? []
      : await em.find(
          VisitSchema,
          { $and: [allowed, { state: 'completed' }] },
          { orderBy: { endedAt: 'asc' }, limit: 40 },
        );
  const items: NowItemDto[] = [];
  for (const row of rows) {
    if (items.length >= most) break;
    const { needed, done } = await verificationOf(em, row);
    if (done >= needed) continue;
    const [visit] = await presentVisits(em, [row]);
    items.push({
      kind: 'visit-to-verify',
      since: row.endedAt?.toISOString() ?? '',
      title: `${visit?.participantCode} · ${visit?.label}`,
      detail: `${done} of ${needed} values that need it are verified.`,
      href: `/studies/${study.code}/verification/${row.id}`,
      action: 'Verify',
    });
  }
  return items;
}

async function queriesIn(em: EntityManager, study: Study, state: Query['state'], action: 'reply' | 'settle') {
  const allowed = accessible('read', 'Query');
  if (allowed === null || study.state !== 'running') return [];
  const rows = await em.find(
    QuerySchema,
    { $and: [allowed, { state }] },
    { orderBy: { openedAt: 'asc' }, limit: most * 3 },
  );
  const mine = rows.filter((row) => may(action, 'Query', row)).slice(0, most);
  const participants = await em.find(ParticipantSchema, {
    id: { $in: mine.map(({ participantId }) => participantId) },
  });
  const codes = new Map(participants.map(({ id, code }) => [id, code]));
  return mine.map((row) => ({
    kind: `query-${state}`,
    since: row.openedAt.toISOString(),
    title: `Query on ${codes.get(row.participantId) ?? ''}`,
    detail: state === 'asked' ? 'It waits for an answer.' : 'It was answered; settle it or ask again.',
    href: `/studies/${study.code}/queries/${row.id}`,
    action: state === 'asked' ? 'Answer' : 'Settle',
  }));
}

function queriesToAnswer(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  return queriesIn(em, study, 'asked', 'reply');
}

function queriesToSettle(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  return queriesIn(em, study, 'replied', 'settle');
}

async function exportsToDecide(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  const rows = await em.find(ExportRequestSchema, { studyId: study.id, state: 'requested' });
  return rows
    .filter((row) => may('decide', 'ExportRequest', row))
    .map((row) => ({
      kind: 'export-to-decide',
      since: row.requestedAt.toISOString(),
      title: `Export ${row.number} waits for your decision`,
      detail: row.purpose,
      href: `/studies/${study.code}/exports/${row.id}`,
      action: 'Read and decide',
    }));
}

async function exportsToTake(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  const rows = await em.find(ExportRequestSchema, {
    studyId: study.id,
    state: 'ready',
    requestedById: currentPersonId(),
  });
  return rows.map((row) => ({
    kind: 'export-ready',
    since: row.readyAt?.toISOString() ?? '',
    title: `Export ${row.number} is ready`,
    detail: 'It can be downloaded once.',
    href: `/studies/${study.code}/exports/${row.id}`,
    action: 'Download',
  }));
}

async function unblindingToConfirm(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  const row = await em.findOne(UnblindingSchema, { studyId: study.id, confirmedAt: null });
  if (row === null || row.requestedById === currentPersonId() || study.state !== 'locked') return [];
  return [
    {
      kind: 'unblinding-to-confirm',
      since: row.requestedAt.toISOString(),
      title: 'Unblinding waits for a second signature',
      detail: 'After it, conditions and hidden values are open to all members.',
      href: `/studies/${study.code}/unblinding`,
      action: 'Look at it',
    },
  ];
}

async function plansToSign(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  if (study.state !== 'running' || (await em.count(PlanVersionSchema, { studyId: study.id })) > 0) return [];
  const drafts = await em.find(PlanDraftSchema, { studyId: study.id });
  return drafts.map((draft) => ({
    kind: 'plan-to-sign',
    since: new Date().toISOString(),
    title: `${draft.name} is not signed`,
    detail: 'A plan counts as planned only when it is signed before the lock.',
    href: `/studies/${study.code}/plans/${draft.id}`,
    action: 'Open the plan',
  }));
}

async function cutToMake(em: EntityManager, study: Study): Promise<NowItemDto[]> {
  if (study.state !== 'unblinded' || (await em.count(CutSchema, { studyId: study.id, kind: 'final' })) > 0)
    return [];
  return [
    {
      kind: 'cut-to-make',
      since: new Date().toISOString(),
      title: 'The study is unblinded',
      detail: 'Make the final cut and carry the signed plan out on it.',
      href: `/studies/${study.code}/cuts`,
      action: 'Make the cut',
    },
  ];
}
