import { createHash } from 'node:crypto';
import type { IdentifiersBody, ParticipantDto } from '#schemas/api/participants.ts';
import type { Protocol } from '#schemas/protocol/protocol.ts';
import type { StudyState } from '#schemas/vocabulary/states.ts';
import { act } from '#backend/database/act.ts';
import { recordConsent } from '#backend/modules/participants/index.ts';
import { ProtocolVersionSchema } from '#backend/modules/protocol/protocol.entity.ts';
import type { Site } from '#backend/modules/studies/site.entity.ts';
import { StudySchema, type Study } from '#backend/modules/studies/study.entity.ts';
import { acting, theSystem } from './acting.ts';
import type { TestServer } from './server.ts';
import { aMember, aStudy, type Member } from './setup-builders.ts';

/** Words that tell the arm; none of them may reach a blinded person. */
export const armCanaries = [
  'seq-alder',
  'seq-birch',
  'Alder first',
  'Birch first',
  'cond-alder',
  'cond-birch',
  'Alder blend',
  'Birch blend',
];

/** A 2×2 crossover at these sites, with a visit for each period. */
export const aProtocol = (siteCodes: readonly string[], change: Partial<Protocol> = {}): Protocol => ({
  title: 'An invented crossover',
  design: 'crossover-2x2',
  plannedParticipants: 24,
  conditions: [
    { key: 'cond-alder', label: 'Alder blend' },
    { key: 'cond-birch', label: 'Birch blend' },
  ],
  sequences: [
    { key: 'seq-alder', label: 'Alder first', conditions: ['cond-alder', 'cond-birch'] },
    { key: 'seq-birch', label: 'Birch first', conditions: ['cond-birch', 'cond-alder'] },
  ],
  washoutDays: 84,
  sites: [...siteCodes],
  allocation: { blockSizes: [2, 4], stratifyBySite: true },
  visitTypes: [1, 2].map((period) => ({
    key: `period-${period}`,
    label: `Period ${period}`,
    targetDay: period === 1 ? 1 : 85,
    windowBefore: 0,
    windowAfter: 7,
    period,
    runSheet: [
      { ...step('pressure', 10), performedBy: 'coordinator' as const },
      { ...step('sample', 40), performedBy: 'unblinded-technician' as const },
    ],
    measures: [],
  })),
  liveQuantities: [],
  participantLogs: [],
  missedVisitReasons: ['unwell'],
  safetyLimits: [],
  ...change,
});

const step = (key: string, plannedMinute: number) => ({
  key,
  label: `Take the ${key}`,
  anchor: { kind: 'visit-start' as const },
  plannedMinute,
  durationMinutes: 5,
});

/** Publishes a protocol as the investigator. */
export async function publishProtocol(
  server: TestServer,
  study: Pick<Study, 'id'>,
  authorId: string,
  content: Protocol,
  version = 1,
): Promise<void> {
  const about = {
    kind: 'protocol-published',
    subject: ({ id }: { id: string }) => ({ type: 'protocol-version', id }),
    studyId: study.id,
  };
  await acting(server.orm, theSystem, () =>
    act(server.orm.em, about, async (tx) =>
      tx.create(ProtocolVersionSchema, {
        studyId: study.id,
        version,
        content,
        hash: createHash('sha256').update(JSON.stringify(content)).digest('hex'),
        reason: 'first version',
        authorId,
        publishedAt: new Date(),
      }),
    ),
  );
}

/** Moves a study to a state, as its own slices do. */
export async function setStudyState(
  server: TestServer,
  study: Pick<Study, 'id'>,
  state: StudyState,
): Promise<void> {
  const kind = state === 'locked' ? 'study-locked' : 'study-changed';
  const about = { kind, subject: { type: 'study', id: study.id }, studyId: study.id };
  await acting(server.orm, theSystem, () =>
    act(server.orm.em, about, async (tx) => {
      const row = await tx.findOneOrFail(StudySchema, study.id);
      row.state = state;
    }),
  );
}

export interface RunningStudy {
  study: Study;
  sites: Site[];
  /** Path of the study's API. */
  path: string;
  investigator: Member;
  coordinator: Member;
  technician: Member;
}

/** A running crossover with a published protocol and a sealed list of twelve places a site. */
export async function aRunningStudy(
  server: TestServer,
  { code, sealed = true, slotsPerSite = 12 }: { code?: string; sealed?: boolean; slotsPerSite?: number } = {},
): Promise<RunningStudy> {
  const { study, sites } = await aStudy(server, { siteCodes: ['TN', 'UP'], ...(code ? { code } : {}) });
  const investigator = await aMember(server, 'principal-investigator', study);
  const coordinator = await aMember(server, 'coordinator', study);
  const technician = await aMember(server, 'unblinded-technician', study);
  await publishProtocol(server, study, investigator.personId, aProtocol(['TN', 'UP']));
  const path = `/studies/${study.code}`;
  if (sealed) {
    const answer = await technician.client.post(`${path}/allocation`, { blockSizes: [2, 4], slotsPerSite });
    if (answer.status !== 201)
      throw new Error(`Sealing answered ${answer.status}: ${JSON.stringify(answer.body)}`);
  }
  await setStudyState(server, study, 'running');
  return { study, sites, path, investigator, coordinator, technician };
}

let enrolled = 0;
const letters = 'abcdefghijklmnopqrstuvwxyz';

/** Somebody invented; each one another person. */
export function someIdentifiers(change: Partial<IdentifiersBody> = {}): IdentifiersBody {
  enrolled += 1;
  const word = [...String(enrolled)].map((digit) => letters[Number(digit)]).join('');
  return { name: `Canary Fledgling ${word}wing`, birthDate: '1931-12-30', ...change };
}

/** Enrols a participant through the API. */
export async function enrol(
  { path, coordinator }: Pick<RunningStudy, 'path' | 'coordinator'>,
  site: Pick<Site, 'id'>,
  identifiers = someIdentifiers(),
): Promise<ParticipantDto> {
  const answer = await coordinator.client.post<ParticipantDto>(`${path}/participants`, {
    siteId: site.id,
    identifiers,
  });
  if (answer.status !== 201)
    throw new Error(`Enrolling answered ${answer.status}: ${JSON.stringify(answer.body)}`);
  return answer.body;
}

/** Records consent as the completed consent entry does. */
export async function consent(
  server: TestServer,
  study: Pick<Study, 'id'>,
  { id, siteId }: ParticipantDto,
): Promise<void> {
  const about = {
    kind: 'consent-recorded',
    subject: { type: 'participant', id, participantId: id, siteId },
    studyId: study.id,
  };
  const date = new Date().toISOString().slice(0, 10);
  await acting(server.orm, theSystem, () =>
    act(server.orm.em, about, (tx) => recordConsent(tx, id, { date, version: 'consent 1.0' })),
  );
}

/** Enrolled, consented and eligible: everything but the place. */
export async function eligible(
  server: TestServer,
  running: RunningStudy,
  site: Pick<Site, 'id'>,
): Promise<ParticipantDto> {
  const participant = await enrol(running, site);
  await consent(server, running.study, participant);
  const { client } = running.coordinator;
  const consented = await client.get<ParticipantDto>(`${running.path}/participants/${participant.id}`);
  const answer = await client.put<ParticipantDto>(
    `${running.path}/participants/${participant.id}/eligibility`,
    { criteriaMet: true, checkedOn: consented.body.consentedOn },
    { ifMatch: consented.body.revision },
  );
  if (answer.status !== 200)
    throw new Error(`Eligibility answered ${answer.status}: ${JSON.stringify(answer.body)}`);
  return answer.body;
}

/** Assigns the next place through the API. */
export async function allocate(running: RunningStudy, participant: ParticipantDto): Promise<ParticipantDto> {
  const answer = await running.coordinator.client.post<ParticipantDto>(
    `${running.path}/participants/${participant.id}/allocation`,
    {},
    { ifMatch: participant.revision },
  );
  if (answer.status !== 200)
    throw new Error(`Assigning answered ${answer.status}: ${JSON.stringify(answer.body)}`);
  return answer.body;
}
