import type { ParticipantDto } from '#schemas/api/participants.ts';
import type { PenState } from '#frontend/components/pen-mark.tsx';

export type StepKey = 'consent' | 'criteria' | 'place' | 'visits';

export interface ParticipationStep {
  key: StepKey;
  title: string;
  mark: PenState;
  word: string;
  /** What is on record, or what has to come first. */
  detail: string;
  /** The next act that is permitted now. */
  open: boolean;
}

type Facts = Pick<
  ParticipantDto,
  'state' | 'consentedOn' | 'consentVersion' | 'eligibleOn' | 'allocation' | 'visits'
>;

/**
 * The order of taking part: consent, criteria, place in the list, visits. Says of each step that is closed why it
 * is (AC-06); `allocated` is false where the protocol has one sequence and there is no place to give.
 */
export function participationSteps(participant: Facts, allocated: boolean): ParticipationStep[] {
  const steps = [consent(participant), criteria(participant), visits(participant)];
  if (allocated) steps.splice(2, 0, place(participant));
  const over = participant.state === 'withdrawn';
  return over ? steps.map((step) => (step.mark === 'settled' ? step : { ...step, ...stopped })) : steps;
}

const stopped = {
  mark: 'late',
  word: 'stopped',
  detail: 'The participant has withdrawn.',
  open: false,
} as const;

function consent({ consentedOn, consentVersion }: Facts): ParticipationStep {
  const title = 'Consent';
  if (consentedOn === null) {
    const detail = 'Recorded when the consent form of the first visit is completed.';
    return { key: 'consent', title, mark: 'todo', word: 'to do', detail, open: false };
  }
  const detail = `${consentedOn}, ${consentVersion ?? 'version unknown'}`;
  return { key: 'consent', title, mark: 'settled', word: 'on record', detail, open: false };
}

function criteria({ state, eligibleOn }: Facts): ParticipationStep {
  const title = 'Criteria for taking part';
  if (eligibleOn !== null) {
    const detail = `Checked and met on ${eligibleOn}`;
    return { key: 'criteria', title, mark: 'settled', word: 'met', detail, open: false };
  }
  const open = state === 'consented';
  const detail = open ? 'Check every criterion of the protocol.' : 'Checked after the consent.';
  return { key: 'criteria', title, mark: 'todo', word: 'to do', detail, open };
}

function place({ state, eligibleOn, allocation }: Facts): ParticipationStep {
  const title = 'Place in the sealed list';
  if (allocation !== null) {
    const detail = allocation.hidden
      ? 'assigned · hidden until unblinding'
      : `${allocation.sequence.label}: ${allocation.periods.map(({ condition }) => condition.label).join(', then ')}`;
    return {
      key: 'place',
      title,
      mark: allocation.hidden ? 'hidden' : 'settled',
      word: 'assigned',
      detail,
      open: false,
    };
  }
  const open = state === 'consented' && eligibleOn !== null;
  const detail = open ? 'The next place at this site, for good.' : 'Given after consent and criteria.';
  return { key: 'place', title, mark: 'todo', word: 'to do', detail, open };
}

function visits({ visits: { completed, planned, missed } }: Facts): ParticipationStep {
  const title = 'Visits';
  if (planned === 0) {
    return { key: 'visits', title, mark: 'todo', word: 'to do', detail: 'None is planned yet.', open: false };
  }
  const detail = `${completed} of ${planned} completed${missed > 0 ? `, ${missed} missed` : ''}`;
  const done = completed + missed === planned;
  return {
    key: 'visits',
    title,
    mark: done ? 'settled' : 'underway',
    word: done ? 'done' : 'under way',
    detail,
    open: false,
  };
}
