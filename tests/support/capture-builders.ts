import { randomUUID } from 'node:crypto';
import type { EntryDto, RunSheetDto, VisitDto } from '#schemas/api/capture.ts';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import { libraryInstruments } from '#schemas/instruments/library/index.ts';
import { act } from '#backend/database/act.ts';
import { canonicalHash } from '#backend/database/trail/canonical.ts';
import { InstrumentVersionSchema } from '#backend/modules/instruments/instrument.entity.ts';
import type { Study } from '#backend/modules/studies/study.entity.ts';
import { acting, theSystem } from './acting.ts';
import type { Answer, Client } from './client.ts';
import type { TestServer } from './server.ts';

/** Publishes instruments of the library in a study, as they ship. */
export async function publishLibrary(
  server: TestServer,
  study: Pick<Study, 'id'>,
  authorId: string,
  keys: readonly string[],
): Promise<void> {
  for (const { key, title, schema, samples } of libraryInstruments.filter((one) => keys.includes(one.key))) {
    const about = {
      kind: 'instrument-published',
      subject: ({ id }: { id: string }) => ({ type: 'instrument-version', id }),
      studyId: study.id,
    };
    await acting(server.orm, theSystem, () =>
      act(server.orm.em, about, async (tx) =>
        tx.create(InstrumentVersionSchema, {
          studyId: study.id,
          key,
          version: 1,
          title,
          schema,
          samples,
          hash: canonicalHash(schema),
          validatorCode: '',
          reason: 'as it ships',
          authorId,
          publishedAt: new Date(),
        }),
      ),
    );
  }
}

const today = (): string => new Date().toISOString().slice(0, 10);

/** Plans a visit for today and begins it. */
export async function beginVisit(
  client: Client,
  path: string,
  participant: Pick<ParticipantDto, 'id'>,
  visitTypeKey: string,
): Promise<RunSheetDto> {
  const planned = await client.post<VisitDto>(`${path}/participants/${participant.id}/visits`, {
    visitTypeKey,
    plannedOn: today(),
  });
  expectStatus(planned, 201);
  const begun = await client.post(
    `${path}/visits/${planned.body.id}/beginning`,
    { startedAt: new Date().toISOString() },
    { ifMatch: planned.body.revision },
  );
  expectStatus(begun, 200);
  return (await client.get<RunSheetDto>(`${path}/visits/${planned.body.id}`)).body;
}

/** Opens a step's entry. */
export async function openEntry(
  client: Client,
  path: string,
  visitId: string,
  stepKey: string,
): Promise<EntryDto> {
  const answer = await client.post<EntryDto>(`${path}/visits/${visitId}/entries`, { stepKey });
  expectStatus(answer, 201);
  return answer.body;
}

/** Saves values by address; digits are kept as given when a value is text that reads as a number. */
export const save = (
  client: Client,
  path: string,
  entry: Pick<EntryDto, 'id' | 'revision'>,
  values: Record<string, unknown>,
  more: {
    confirmations?: { checkId: string; reason: string }[];
    key?: string;
    ifMatch?: number | string;
  } = {},
): Promise<Answer<EntryDto>> =>
  client.send<EntryDto>('PATCH', `${path}/entries/${entry.id}`, {
    body: {
      operations: Object.entries(values).map(([pointer, value]) => ({ pointer, value })),
      ...(more.confirmations ? { confirmations: more.confirmations } : {}),
    },
    ifMatch: more.ifMatch ?? entry.revision,
    headers: { 'Idempotency-Key': more.key ?? randomUUID() },
  });

export function expectStatus(answer: Answer<unknown>, status: number): void {
  if (answer.status !== status) throw new Error(`Answered ${answer.status}: ${JSON.stringify(answer.body)}`);
}
