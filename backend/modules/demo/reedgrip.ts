import { addDays } from '#schemas/protocol/visit-window.ts';
import type { StudyPlan } from '#analysis/study/study-plan.ts';
import { reedgrip } from '#schemas/protocol/demo/reedgrip.ts';
import type { Deps } from '#backend/http/deps.ts';
import { draftPlan } from '../analysis/index.ts';
import { planVisit } from '../capture/index.ts';
import { askQuery, replyToQuery } from '../monitoring/index.ts';
import { sealAllocation } from '../participants/index.ts';
import type { Participant } from '../participants/participant.entity.ts';
import { saveProtocolDraft, startProtocolDraft } from '../protocol/index.ts';
import type { People } from './cast.ts';
import { Chance } from './chance.ts';
import { allocate, at, begin, daysAgo, end, enrol } from './enrol.ts';
import {
  checksForm,
  consentForm,
  demographicsForm,
  dopplerForm,
  juiceForm,
  pressuresForm,
  roomForm,
} from './forms.ts';
import { createDemoStudy, publishStudy, type DemoStudy } from './set-up.ts';

const participants = 10;

/** Builds REEDGRIP: running and inconclusive so far, with queries, an overdue visit, missing readings and a draft amendment. */
export async function seedReedgrip(
  deps: Deps,
  people: People,
  report: (text: string) => void,
): Promise<void> {
  const study = await createDemoStudy(deps, people, {
    code: 'reedgrip',
    name: 'REEDGRIP',
    title: reedgrip.title,
    sites: [{ code: 'RB', name: 'Reed Bank', timeZone: 'Europe/Lisbon' }],
  });
  await publishStudy(study, reedgrip);
  await study.technician.does((em) =>
    sealAllocation(em, deps.settings.identity, { blockSizes: [2, 4], slotsPerSite: 12 }),
  );
  const enrolled: Participant[] = [];
  for (let number = 0; number < participants; number += 1) {
    enrolled.push(await runParticipant(deps, study, number));
    report(`REEDGRIP, participant ${number + 1} of ${participants}`);
  }
  await askQueries(study, enrolled);
  await draftAmendment(study);
  await study.statistician.does((em) => draftPlan(em, { name: 'Primary plan', content: reedgripPlan }));
}

async function runParticipant(deps: Deps, study: DemoStudy, number: number): Promise<Participant> {
  const chance = new Chance(9_101 + number);
  const firstTest = daysAgo(34 - number * 3);
  const participant = await enrol(deps, study, 'RB', 100 + number, addDays(firstTest, -8), chance);
  const screening = await begin(study, participant, 'screening', addDays(firstTest, -7));
  await study.coordinator.fill(screening, 'consent', consentForm(addDays(firstTest, -7)));
  await study.coordinator.fill(screening, 'demographics', demographicsForm(chance));
  await study.coordinator.fill(screening, 'checks', checksForm(chance));
  await study.coordinator.fill(screening, 'pressures', pressuresForm(chance, chance.around(88, 6)));
  await end(study, screening);
  const sequence = await allocate(study, participant, addDays(firstTest, -7));
  await test(study, participant, {
    key: 'first-test',
    day: firstTest,
    number,
    nitrate: sequence === 'nitrate',
    chance,
  });
  const secondTest = addDays(firstTest, 7);
  if (number < 6)
    await test(study, participant, {
      key: 'second-test',
      day: secondTest,
      number,
      nitrate: sequence === 'nitrate',
      chance,
    });
  // From the seventh on the second test is still to come; one of them should have been by now.
  else
    await study.coordinator.does((em) =>
      planVisit(em, participant.id, { visitTypeKey: 'second-test', plannedOn: secondTest }),
    );
  return participant;
}

interface Test {
  key: string;
  day: string;
  number: number;
  nitrate: boolean;
  chance: Chance;
}

async function test(
  study: DemoStudy,
  participant: Participant,
  { key, day, number, nitrate, chance }: Test,
): Promise<void> {
  const { coordinator, technician } = study;
  const visitId = await begin(study, participant, key, day);
  const pressure = chance.around(88, 5);
  // Published means at 15 % of maximum with a wide spread: Physiol Rep 2018;6:e13572. Invented for the demo.
  const rest = Math.exp(chance.around(Math.log(62), 0.22));
  const exercise = Math.exp(chance.around(Math.log(164), 0.22));
  const gain = nitrate ? 1.06 : 1;
  await coordinator.fill(visitId, 'checks', checksForm(chance));
  await coordinator.fill(visitId, 'room', roomForm(chance, day));
  await coordinator.stamp(visitId, { stepKey: 'rest', kind: 'stamped', observedAt: at(day, 16) });
  await coordinator.fill(visitId, 'pressures', pressuresForm(chance, pressure));
  await coordinator.fill(visitId, 'rest-before', dopplerForm(chance, 'rest', rest, pressure));
  await coordinator.fill(visitId, 'exercise-before', dopplerForm(chance, 'exercise', exercise, pressure + 8));
  await technician.fill(visitId, 'juice', juiceForm(number + 1));
  await coordinator.fill(visitId, 'rest-after', dopplerForm(chance, 'rest', rest * gain, pressure - 1));
  const last = dopplerForm(
    chance,
    'exercise',
    exercise * gain * Math.exp(chance.around(0, 0.18)),
    pressure + 7,
  );
  const gap = number === 3 && key === 'first-test';
  await coordinator.fill(
    visitId,
    'exercise-after',
    gap ? { ...last, '/gate': { missing: 'not-done' } } : last,
    { complete: !(number === 5 && key === 'second-test') },
  );
  if (number === 5 && key === 'second-test') return;
  await end(study, visitId);
}

async function askQueries(
  { monitor, coordinator }: DemoStudy,
  enrolled: readonly Participant[],
): Promise<void> {
  const texts = [
    'The source sheet reads another diastolic pressure in the second reading. Which is right?',
    'The room log has no barometer. Was it out of order?',
    'Minutes rested are the same at every visit. Please confirm that they were read from the clock.',
  ];
  for (const [index, text] of texts.entries()) {
    const participantId = enrolled[index * 2]?.id ?? '';
    const query = await monitor.does((em) => askQuery(em, { participantId, text }));
    if (index === 1) {
      await coordinator.does((em) =>
        replyToQuery(em, query.id, query.revision, 'Yes; it was replaced the week after.'),
      );
    }
  }
}

async function draftAmendment({ investigator }: DemoStudy): Promise<void> {
  const draft = await investigator.does((em) => startProtocolDraft(em, { from: 'newest' }));
  const amended = {
    ...reedgrip,
    safetyLimits: [
      ...reedgrip.safetyLimits,
      {
        key: 'hand',
        label: 'Hand',
        text: 'Stop when the hand tingles for longer than a minute. Invented for this demonstration.',
      },
    ],
  };
  await investigator.does((em) =>
    saveProtocolDraft(em, draft.revision, { text: JSON.stringify(amended, null, 2) }),
  );
}

const reedgripPlan: StudyPlan = {
  title: 'Nitrate-rich juice against placebo: conductance during handgrip',
  estimand:
    'The ratio of geometric means of forearm conductance during handgrip at 15 % of maximum after the juice, adjusted for the value before it, nitrate-rich over nitrate-depleted juice.',
  design: 'parallel',
  conditions: ['nitrate-juice', 'placebo-juice'],
  flow: 'brachialBloodFlow',
  baselineTimePoint: 'exercise-baseline',
  timePoint: 'exercise-after',
  viscosity: null,
  primary: 'conductance',
  secondary: [],
  method: 'ancova_change',
  equivalence: null,
  confidence: 0.95,
  multiplicity: 'none',
  missingData: 'Participants without a first test are left out and named with the reason.',
  sensitivityLaws: [],
  seed: 4_711,
};
