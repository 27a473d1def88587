import type { EntityManager } from '@mikro-orm/postgresql';
import { randomBytes, randomUUID } from 'node:crypto';
import type { SealAllocationBody } from '#schemas/api/participants.ts';
import type { Protocol } from '#schemas/protocol/protocol.ts';
import type { IdentityKeys } from '#backend/config/settings.ts';
import { act } from '#backend/database/act.ts';
import { currentPersonId, currentStudyId } from '#backend/http/actor.ts';
import { authorize } from '#backend/http/authorize.ts';
import { invalidBody, stateForbids } from '#backend/http/problem.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import { assertStudyOpen } from '../studies/index.ts';
import { SiteSchema } from '../studies/site.entity.ts';
import { listCommitment, makeAllocationList, type ListMaking } from './allocation-list.ts';
import { AllocationListSchema, AllocationSlotSchema, type AllocationList } from './allocation.entity.ts';
import { ParticipantSchema } from './participant.entity.ts';
import { sealWithKeyId, unsealWithKeyId } from './sealing.ts';

/** The one stratum of a list that is not stratified by site. */
export const wholeStudy = 'all';

/**
 * Makes the study's allocation list, seals it and publishes its digest (RB-01, RB-12). Nobody sees the list: not who
 * makes it either, only one place after the other as participants are assigned.
 */
export async function sealAllocation(
  em: EntityManager,
  keys: IdentityKeys,
  body: SealAllocationBody,
): Promise<AllocationList> {
  authorize('seal', 'AllocationList', { studyId: currentStudyId() });
  const about = {
    kind: 'allocation-sealed',
    subject: ({ id }: AllocationList) => ({ type: 'allocation-list', id }),
  };
  return act(em, about, async (tx) => {
    await assertStudyOpen(tx);
    await assertFirst(tx);
    const protocol = await publishedProtocol(tx);
    assertBalanced(protocol, body);
    return storeSealed(tx, keys, protocol, body);
  });
}

/** One list a study, before its first participant. The study's lock makes two simultaneous sealings one. */
async function assertFirst(tx: EntityManager): Promise<void> {
  const studyId = currentStudyId();
  await tx.execute('select pg_advisory_xact_lock(hashtextextended(?, 1))', [studyId]);
  if ((await tx.count(AllocationListSchema, { studyId })) > 0) {
    throw stateForbids('The allocation list of this study is sealed already; it is made once.');
  }
  if ((await tx.count(ParticipantSchema, { studyId })) > 0) {
    throw stateForbids('Participants are enrolled already: a list is sealed before the first of them.');
  }
}

async function publishedProtocol(tx: EntityManager): Promise<Protocol> {
  const version = await tx.findOne(
    ProtocolVersionSchema,
    { studyId: currentStudyId() },
    { orderBy: { version: 'desc' } },
  );
  if (version === null)
    throw stateForbids('Publish the protocol first: the list is made from its sequences.');
  return version.content;
}

function assertBalanced({ sequences }: Protocol, { blockSizes }: SealAllocationBody): void {
  if (sequences.length < 2)
    throw stateForbids('The protocol has one sequence: there is nothing to allocate.');
  const wrong = [...blockSizes.entries()].filter(([, size]) => size % sequences.length !== 0);
  if (wrong.length === 0) return;
  throw invalidBody(
    wrong.map(([at]) => ({
      pointer: `/blockSizes/${at}`,
      detail: `must be a multiple of ${sequences.length}, the number of sequences`,
    })),
  );
}

async function storeSealed(
  tx: EntityManager,
  keys: IdentityKeys,
  protocol: Protocol,
  { blockSizes, slotsPerSite }: SealAllocationBody,
): Promise<AllocationList> {
  const studyId = currentStudyId();
  const sites = await tx.find(SiteSchema, { studyId }, { orderBy: { code: 'asc' } });
  if (sites.length === 0) throw stateForbids('The study has no site yet.');
  const strata = protocol.allocation.stratifyBySite
    ? sites.map(({ code }) => ({ key: code, slots: slotsPerSite }))
    : [{ key: wholeStudy, slots: slotsPerSite * sites.length }];
  const making: ListMaking = {
    seed: randomBytes(32).toString('hex'),
    strata,
    sequences: protocol.sequences.map(({ key }) => key),
    blockSizes,
  };
  const salt = randomBytes(32).toString('hex');
  const slots = makeAllocationList(making);
  const id = randomUUID();
  const list = tx.create(AllocationListSchema, {
    id,
    studyId,
    sealedById: currentPersonId(),
    sealedAt: new Date(),
    commitment: listCommitment(salt, slots),
    sealedMaking: sealWithKeyId(keys, placeOf(id), JSON.stringify({ ...making, salt })),
    slots: slots.length,
  });
  const siteIds = new Map(sites.map((site) => [site.code, site.id]));
  const rows = slots.map(({ stratum, position, sequence }) => ({
    id: randomUUID(),
    studyId,
    listId: id,
    siteId: siteIds.get(stratum) ?? sites[0]!.id,
    position,
    sequenceKey: sequence,
  }));
  // Written in the order of their random ids, so that the order in the trail does not give their places.
  for (const row of rows.sort((one, other) => (one.id < other.id ? -1 : 1)))
    tx.create(AllocationSlotSchema, row);
  return list;
}

/** Opens what a list was made from. Callers see to it that the study is unblinded. */
export const openMaking = (keys: IdentityKeys, list: AllocationList): ListMaking & { salt: string } =>
  JSON.parse(unsealWithKeyId(keys, placeOf(list.id), list.sealedMaking)) as ListMaking & { salt: string };

const placeOf = (listId: string) => ({ table: 'allocation_list', row: listId, column: 'sealed_making' });
