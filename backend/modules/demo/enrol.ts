import type { EntityManager } from '@mikro-orm/postgresql';
import type { Deps } from '#backend/http/deps.ts';
import { assignAllocation, confirmEligibility, enrolParticipant } from '../participants/index.ts';
import { AllocationSlotSchema } from '../participants/allocation.entity.ts';
import { ParticipantSchema, type Participant } from '../participants/participant.entity.ts';
import { beginVisit, completeVisit, planVisit } from '../capture/index.ts';
import { VisitSchema } from '../capture/visit.entity.ts';
import { addDays } from '#schemas/protocol/visit-window.ts';
import type { Chance } from './chance.ts';
import type { DemoStudy } from './set-up.ts';

const firstNames = [
  'Aldo',
  'Brine',
  'Calla',
  'Drift',
  'Elver',
  'Fenna',
  'Gorse',
  'Heron',
  'Isla',
  'Jasper',
  'Kelda',
  'Linnet',
];
const lastNames = [
  'Saltmarsh',
  'Fernhollow',
  'Quarryman',
  'Thistledown',
  'Mossbank',
  'Ryegrass',
  'Windle',
  'Cobblepot-Reed',
];

/** Somebody who does not exist, and whose name says so. */
export function inventedPerson(number: number, chance: Chance) {
  const year = 1955 + Math.floor(chance.even() * 40);
  const day = 1 + Math.floor(chance.even() * 27);
  return {
    name: `${firstNames[number % firstNames.length]} ${lastNames[(number * 5) % lastNames.length]} the ${number + 1}th`,
    birthDate: `${year}-0${1 + (number % 9)}-${String(day).padStart(2, '0')}`,
    phone: `000 555 ${String(1000 + number)}`,
    recordNumber: `INVENTED-${1000 + number}`,
  };
}

/** A day so many days before today: the demo is always recent. */
export const daysAgo = (days: number): string => addDays(new Date().toISOString().slice(0, 10), -days);

/** An instant at a place's morning, some minutes later; near enough for an invented visit. */
export const at = (day: string, minutes: number): string =>
  new Date(Date.parse(`${day}T13:00:00Z`) + minutes * 60_000).toISOString();

export async function enrol(
  deps: Deps,
  { coordinator, sites }: DemoStudy,
  siteCode: string,
  number: number,
  enrolledOn: string,
  chance: Chance,
): Promise<Participant> {
  const site = sites.get(siteCode);
  if (site === undefined) throw new Error(`The demo has no site ${siteCode}.`);
  const identifiers = inventedPerson(number, chance);
  return coordinator.does((em) =>
    enrolParticipant(em, deps.settings.identity, { siteId: site.id, enrolledOn, identifiers }, null),
  );
}

/** Plans a visit on a day and begins it there. */
export async function begin(
  { coordinator }: DemoStudy,
  participant: Participant,
  visitTypeKey: string,
  day: string,
): Promise<string> {
  const visit = await coordinator.does((em) =>
    planVisit(em, participant.id, { visitTypeKey, plannedOn: day }),
  );
  await coordinator.does((em) => beginVisit(em, visit.id, visit.revision, { startedAt: at(day, 0) }));
  return visit.id;
}

export const end = ({ coordinator }: DemoStudy, visitId: string): Promise<unknown> =>
  coordinator.does(async (em) =>
    completeVisit(em, visitId, (await em.findOneOrFail(VisitSchema, visitId)).revision),
  );

/** Confirms eligibility and assigns the next place; answers which sequence it is, as the technician would know. */
export async function allocate(
  { coordinator }: DemoStudy,
  participant: Participant,
  checkedOn: string,
): Promise<string> {
  const now = await coordinator.does((em) => em.findOneOrFail(ParticipantSchema, participant.id));
  const eligible = await coordinator.does((em) =>
    confirmEligibility(em, participant.id, now.revision, { criteriaMet: true, checkedOn }),
  );
  await coordinator.does((em) => assignAllocation(em, participant.id, eligible.revision));
  const sequenceOf = async (em: EntityManager): Promise<string> =>
    (await em.findOneOrFail(AllocationSlotSchema, { participantId: participant.id })).sequenceKey;
  return coordinator.does(sequenceOf);
}
