import type { Request, Response } from 'express';
import {
  correctEntryBody,
  completeEntryBody,
  entryDto,
  openEntryBody,
  openLogEntryBody,
  saveEntryBody,
  voidEntryBody,
  type CompleteEntryBody,
  type CorrectEntryBody,
  type OpenEntryBody,
  type OpenLogEntryBody,
  type SaveEntryBody,
} from '#schemas/api/capture.ts';
import type { Action } from '#schemas/abilities/ability.ts';
import type { ActKind } from '#schemas/vocabulary/act-kinds.ts';
import type { Deps } from '#backend/http/deps.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { assertReadable } from '#backend/http/authorize.ts';
import { idempotencyKey, type IdempotencyKey } from '#backend/http/idempotency.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { EntrySchema } from './entry.entity.ts';
import { entryHistory } from './entry-history.ts';
import { presentEntry } from './entry.presenter.ts';
import { completeEntry, voidEntry } from './close-entry.ts';
import { openLogEntry, openStepEntry } from './open-entry.ts';
import { correctEntry, saveEntry } from './save-entry.ts';
import { loadEntry, type LoadedEntry } from './load-entry.ts';

const study = '/studies/:studyCode';

/** Entries: opened, saved reading by reading, completed, corrected, voided; read with their history. */
export function declareEntryRoutes({ route }: RouteTable, { orm: { em } }: Deps): void {
  const answer = async (response: Response, loaded: LoadedEntry, status = 200): Promise<void> => {
    response
      .status(status)
      .set('ETag', etag(loaded.entry.revision))
      .json(await presentEntry(em.fork(), loaded));
  };

  route({
    method: 'post',
    path: `${study}/visits/:visitId/entries`,
    summary: 'Open the entry of a step',
    gate: ['read', 'Entry'],
    body: openEntryBody,
    responds: { status: 201, body: entryDto },
    acts: ['entry-opened'],
    handler: async (request, response) => {
      const { stepKey } = request.body as OpenEntryBody;
      await answer(response, await openStepEntry(em, idParameter(request, 'visitId'), stepKey), 201);
    },
  });

  route({
    method: 'post',
    path: `${study}/participants/:participantId/entries`,
    summary: 'Open an entry in a participant’s own log',
    gate: ['create', 'Entry'],
    body: openLogEntryBody,
    responds: { status: 201, body: entryDto },
    acts: ['entry-opened'],
    handler: async (request, response) => {
      const body = request.body as OpenLogEntryBody;
      await answer(response, await openLogEntry(em, idParameter(request, 'participantId'), body), 201);
    },
  });

  route({
    method: 'get',
    path: `${study}/participants/:participantId/entries`,
    summary: 'The entries of a participant’s own logs',
    gate: ['read', 'Entry'],
    responds: { status: 200, body: { type: 'array', items: { type: 'object' } } },
    acts: null,
    handler: async (request, response) => {
      const participantId = idParameter(request, 'participantId');
      const participant = await em.findOne(ParticipantSchema, {
        studyId: currentStudyId(),
        id: participantId,
      });
      assertReadable('Participant', participant, 'This participant');
      const allowed = accessible('read', 'Entry');
      const rows =
        allowed === null
          ? []
          : await em.find(EntrySchema, { $and: [allowed, { participantId, visitId: null }] });
      response.json(
        rows.map(({ id, instrumentKey, state, revision, completedAt }) => ({
          id,
          instrumentKey,
          state,
          revision,
          completedAt: completedAt?.toISOString() ?? null,
        })),
      );
    },
  });

  route({
    method: 'get',
    path: `${study}/entries/:entryId`,
    summary: 'An entry as its viewer may know it',
    gate: ['read', 'Entry'],
    responds: { status: 200, body: entryDto },
    acts: null,
    handler: async (request, response) => {
      await answer(response, await loadEntry(em, idParameter(request, 'entryId')));
    },
  });

  route({
    method: 'get',
    path: `${study}/entries/:entryId/history`,
    summary: 'Every change of an entry, with who, when and why',
    gate: ['read', 'Entry'],
    responds: { status: 200, body: { type: 'array', items: { type: 'object' } } },
    acts: null,
    handler: async (request, response) => {
      response.json(await entryHistory(em, await loadEntry(em, idParameter(request, 'entryId'))));
    },
  });

  route({
    method: 'patch',
    path: `${study}/entries/:entryId`,
    summary: 'Save values of an open entry, one operation a field or reading',
    gate: ['update', 'Entry'],
    body: saveEntryBody,
    responds: { status: 200, body: entryDto },
    acts: ['entry-saved'],
    handler: async (request, response) => {
      const body = request.body as SaveEntryBody;
      const key = idempotencyKey(request);
      await answer(
        response,
        await saveEntry(em, idParameter(request, 'entryId'), ifMatch(request), body, key),
      );
    },
  });

  const change = (
    path: string,
    summary: string,
    gate: Action,
    acts: readonly ActKind[],
    body: object,
    work: (request: Request, id: string, seen: number, key: IdempotencyKey | null) => Promise<LoadedEntry>,
  ): void =>
    route({
      method: 'post',
      path: `${study}/entries/:entryId/${path}`,
      summary,
      gate: [gate, 'Entry'],
      body,
      responds: { status: 200, body: entryDto },
      acts,
      handler: async (request, response) => {
        const key = idempotencyKey(request);
        await answer(response, await work(request, idParameter(request, 'entryId'), ifMatch(request), key));
      },
    });

  change(
    'completion',
    'Complete an entry',
    'complete',
    ['entry-completed'],
    completeEntryBody,
    (request, id, seen, key) => completeEntry(em, id, seen, request.body as CompleteEntryBody, key),
  );
  change(
    'corrections',
    'Correct a completed entry with a reason',
    'correct',
    ['entry-corrected', 'entry-saved'],
    correctEntryBody,
    (request, id, seen, key) => correctEntry(em, id, seen, request.body as CorrectEntryBody, key),
  );
  change(
    'voiding',
    'Void an entry with a reason',
    'void',
    ['entry-voided'],
    voidEntryBody,
    (request, id, seen, key) => voidEntry(em, id, seen, (request.body as { reason: string }).reason, key),
  );
}
