import type { UnblindingDto } from '#schemas/api/participants.ts';
import type { PenState } from '#frontend/components/pen-mark.tsx';

export interface UnblindingStep {
  title: string;
  mark: PenState;
  word: string;
  detail: string;
  /** What the viewer can do here, as far as the order of things allows it. */
  act: 'ask' | 'confirm' | null;
}

const done = { mark: 'settled', word: 'done', act: null } as const;
const waiting = { mark: 'todo', word: 'to do', act: null } as const;

/** The order of an unblinding (RB-08); of a step that is closed it says why. */
export function unblindingSteps(
  { studyState, request, confirmed }: UnblindingDto,
  moment: (instant: string) => string,
): UnblindingStep[] {
  const locked = studyState === 'locked' || studyState === 'unblinded';
  const lock: UnblindingStep = locked
    ? { ...done, title: 'The data are locked', detail: 'Nothing in them is changed any more.' }
    : {
        ...waiting,
        title: 'The data are locked',
        detail: 'Unblinding opens after the lock, on the page Records.',
      };
  const first: UnblindingStep =
    request === null
      ? {
          ...waiting,
          title: 'One person asks',
          detail: 'The investigator or the statistician, with a reason and the password.',
          act: locked ? 'ask' : null,
        }
      : {
          ...done,
          title: `${request.by} asked`,
          detail: `${moment(request.at)}: ${request.reason}`,
        };
  return [lock, first, second({ studyState, request, confirmed }, moment)];
}

function second(
  { studyState, request, confirmed }: UnblindingDto,
  moment: (instant: string) => string,
): UnblindingStep {
  if (confirmed !== null)
    return { ...done, title: `${confirmed.by} confirmed`, detail: moment(confirmed.at) };
  const title = 'Another person confirms';
  if (request === null) return { ...waiting, title, detail: 'After somebody has asked.' };
  if (request.byMe) return { ...waiting, title, detail: 'You asked, so it takes somebody else.' };
  if (studyState !== 'locked')
    return { ...waiting, title, detail: 'The study was unlocked: lock it again first.' };
  return {
    mark: 'asks',
    word: 'waits',
    title,
    detail: 'With the password; the study is unblinded at once.',
    act: 'confirm',
  };
}
