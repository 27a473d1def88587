import type { Chance } from './chance.ts';
import { typed, type Filled, type Typed } from './stage.ts';

const clock = (minutes: number): string =>
  `${String(Math.floor(minutes / 60)).padStart(2, '0')}:${String(Math.floor(minutes % 60)).padStart(2, '0')}`;

/** Single readings at their addresses. */
export const readings = (
  pointer: string,
  values: readonly (Typed | number)[],
): Record<string, Typed | number> =>
  Object.fromEntries(values.map((value, index) => [`${pointer}/${index}`, value]));

export const consentForm = (day: string): Filled => ({
  '/consentVersion': '1.0',
  '/informationSheetGiven': true,
  '/questionsAnswered': true,
  '/consentGiven': true,
  '/consentedOn': day,
  '/signedCopyGiven': true,
  '/storeSamples': true,
  '/contactAgain': true,
  '/shareData': true,
  '/takenBy': 'staff 04',
});

export function demographicsForm(chance: Chance): Filled {
  const female = chance.even() < 0.5;
  const height = chance.around(female ? 160 : 171, 6);
  return {
    '/age': Math.round(chance.around(46, 11)),
    '/sex': female ? 'female' : 'male',
    '/height': typed(height, 1),
    '/mass': typed(chance.around(24.5, 2.4) * (height / 100) ** 2, 1),
    '/dominantArm': chance.even() < 0.9 ? 'right' : 'left',
    '/altitudeOfResidence': Math.round(chance.around(3600, 150)),
    '/yearsAtAltitude': 15,
    '/smoking': chance.pick(['never', 'never', 'former']),
  };
}

export function checksForm(chance: Chance): Filled {
  return {
    '/startTime': clock(8 * 60 + 20 + chance.even() * 30),
    '/hoursSinceFood': typed(10 + chance.even() * 3, 1),
    '/hoursSinceCaffeine': Math.round(14 + chance.even() * 8),
    '/hoursSinceAlcohol': Math.round(30 + chance.even() * 40),
    '/hoursSinceNicotine': { missing: 'not-applicable' },
    '/hoursSinceExercise': Math.round(26 + chance.even() * 30),
    '/sleep': typed(chance.around(7.2, 0.6), 1),
    '/newMedicine': false,
    '/mouthwash': false,
    '/illness': false,
    '/pregnancyTest': 'not-applicable',
    '/bladderEmptied': true,
  };
}

export const roomForm = (chance: Chance, day: string): Filled => ({
  '/loggedOn': day,
  '/roomTemperature': typed(chance.around(22.6, 0.5), 1),
  '/humidity': Math.round(chance.around(38, 5)),
  '/plethysmograph': 'unit 2',
  '/serialNumber': 'PL-0002',
  '/calibratedUntil': '2027-12-31',
  '/gain': 'x5',
  '/calibrationStep': 1,
  '/deflectionBefore': 250,
  '/deflectionAfter': Math.round(chance.around(248, 2)),
  '/transducerZeroed': true,
});

/** Triplicate around a mean pressure: a third of the pulse above diastolic. */
export function pressuresForm(chance: Chance, meanPressure: number): Filled {
  const pulse = chance.around(44, 4);
  const at = (extra: number): { systolic: number; diastolic: number } => {
    const mean = meanPressure + extra + chance.around(0, 0.8);
    return { systolic: Math.round(mean + (2 * pulse) / 3), diastolic: Math.round(mean - pulse / 3) };
  };
  const taken = [at(2.5), at(0), at(0)];
  return {
    '/arm': 'left',
    '/cuffSize': 'adult',
    '/device': 'cuff 3',
    '/posture': 'supine',
    '/armHeight': 0,
    '/minutesRested': 25,
    ...readings(
      '/systolic',
      taken.map(({ systolic }) => systolic),
    ),
    ...readings(
      '/diastolic',
      taken.map(({ diastolic }) => diastolic),
    ),
    ...readings(
      '/heartRate',
      taken.map(() => Math.round(chance.around(63, 3))),
    ),
  };
}

/** Blood with a haematocrit and a plasma viscosity; haemoglobin goes with the cells. */
export function bloodForm(chance: Chance, haematocrit: number, plasmaViscosity: number): Filled {
  const tube = (): Typed => typed(haematocrit + chance.around(0, 0.003), 3);
  const tubes = [tube(), tube()];
  // A third tube when the two differ by more than 0.01, as at the bench.
  if (Math.abs(tubes[0]!.value - tubes[1]!.value) > 0.01) tubes.push(typed(haematocrit, 3));
  return {
    '/posture': 'supine',
    '/minutesInPosture': 25,
    '/tourniquetSeconds': 0,
    '/volumeDiscarded': 5,
    '/volumeDrawn': 10,
    '/timeDrawn': '09:10',
    '/timeSpun': '09:25',
    '/timeRead': '09:40',
    '/haematocritMethod': 'microhaematocrit',
    '/spinMinutes': 5,
    '/secondSpin': true,
    ...readings('/haematocritTubes', tubes),
    '/haemoglobin': typed(haematocrit * chance.around(33.7, 0.4), 1),
    '/plasmaViscosity': typed(plasmaViscosity, 2),
    '/viscosityTemperature': 37,
    '/hoursToViscometry': typed(1 + chance.even(), 1),
    '/totalProtein': typed(chance.around(71, 2.5), 1),
    '/reader': 'reader 2',
  };
}

/** A block of eight cycles in both arms; the last five accepted count. */
export function flowForm(chance: Chance, flow: number): Filled {
  const block = (mean: number): Typed[] =>
    Array.from({ length: 8 }, () => typed(mean * Math.exp(chance.around(0, 0.07)), 2));
  return {
    '/startTime': clock(9 * 60 + 20 + chance.even() * 20),
    '/calibratedAtThisGain': true,
    '/hyperaemia': false,
    '/infusedArm': 'none',
    '/circumferenceRight': typed(chance.around(26.5, 0.6), 1),
    '/circumferenceLeft': typed(chance.around(26.2, 0.6), 1),
    '/skinTemperature': typed(chance.around(32.4, 0.4), 1),
    '/collectingCuff': 45,
    '/inflationTime': typed(0.3, 1),
    '/wristCuff': 220,
    '/wristCuffSeconds': 70,
    ...readings('/flowRight', block(flow)),
    ...readings('/flowLeft', block(flow * Math.exp(chance.around(-0.02, 0.03)))),
    '/reader': 'reader 1',
  };
}

export const exchangeForm = (dilution: boolean): Filled => ({
  '/startTime': '10:10',
  '/endTime': '10:55',
  '/procedure': dilution ? 'haemodilution' : 'sham',
  '/volumeOut': 900,
  '/volumeIn': 900,
  '/fluid': dilution ? 'albumin-5' : 'own-blood',
  '/fluidLot': 'lot A-17',
  '/rate': 20,
  '/fluidTemperature': 37,
  '/cellsReturned': dilution ? 0 : 430,
  '/cumulativeVolumeOut': 900,
  '/protocolLimit': 1200,
  '/lowestSystolic': 106,
  '/lowestSaturation': 91,
  '/symptoms': ['none'],
  '/stoppedEarly': false,
  '/limitPassedOnAuthority': false,
  '/operator': 'staff 09',
});

export const guessForm = (chance: Chance, period: number): Filled => ({
  '/respondent': 'participant',
  '/period': period,
  '/guess': chance.pick(['intervention', 'control', 'do-not-know']),
  '/certainty': Math.round(chance.even() * 60),
  '/reason': ['felt-different'],
});

export const endForm = (day: string, lastPeriod: number): Filled => ({
  '/endedOn': day,
  '/status': 'completed',
  '/lastPeriodCompleted': lastPeriod,
  '/safetyFollowUp': true,
  '/openAdverseEvents': false,
  '/dataMayBeKept': true,
});

/** Doppler of the brachial artery: flow = π (d/2)² v 60, with d in cm. */
export function dopplerForm(
  chance: Chance,
  phase: 'rest' | 'exercise',
  flow: number,
  meanPressure: number,
): Filled {
  const diameter = chance.around(4.3, 0.15);
  const velocity = flow / (60 * Math.PI * (diameter / 20) ** 2);
  const three = (mean: number, spread: number, decimals: number): Typed[] =>
    [0, 1, 2].map(() => typed(mean * Math.exp(chance.around(0, spread)), decimals));
  return {
    '/phase': phase,
    '/arm': 'right',
    ...(phase === 'exercise'
      ? {
          ...readings('/maximumTrials', three(405, 0.01, 0)),
          '/targetPercent': 15,
          '/contractionSeconds': 1,
          '/relaxationSeconds': 2,
          '/exerciseMinutes': 5,
          '/achievedForce': Math.round(chance.around(61, 1)),
        }
      : {}),
    '/angle': 60,
    '/gate': 4,
    ...readings('/diameter', three(diameter, 0.01, 2)),
    ...readings('/velocity', three(velocity, 0.03, 1)),
    '/systolic': Math.round(meanPressure + 30),
    '/diastolic': Math.round(meanPressure - 15),
    '/meanPressure': Math.round(meanPressure),
    '/pressureMethod': 'finger',
    '/heartRate': Math.round(chance.around(phase === 'rest' ? 63 : 78, 4)),
    '/reader': 'reader 3',
  };
}

export const juiceForm = (number: number): Filled => ({
  '/preparation': `bottle ${number}`,
  '/lot': 'lot 7',
  '/volume': 140,
  '/drunkAt': '09:40',
  '/minutesToDrink': 4,
  '/finished': true,
  '/tasteNoticed': false,
  '/givenBy': 'staff 09',
});
