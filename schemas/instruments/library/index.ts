import type { InstrumentSchema, SampleEntry } from '../instrument.ts';
import consent from './consent.json' with { type: 'json' };
import consentSamples from './consent.samples.json' with { type: 'json' };
import preVisitChecks from './pre-visit-checks.json' with { type: 'json' };
import preVisitChecksSamples from './pre-visit-checks.samples.json' with { type: 'json' };
import demographicsAndAnthropometry from './demographics-and-anthropometry.json' with { type: 'json' };
import demographicsAndAnthropometrySamples from './demographics-and-anthropometry.samples.json' with { type: 'json' };
import roomAndCalibrationLog from './room-and-calibration-log.json' with { type: 'json' };
import roomAndCalibrationLogSamples from './room-and-calibration-log.samples.json' with { type: 'json' };
import restingPressures from './resting-pressures.json' with { type: 'json' };
import restingPressuresSamples from './resting-pressures.samples.json' with { type: 'json' };
import forearmPlethysmography from './forearm-plethysmography.json' with { type: 'json' };
import forearmPlethysmographySamples from './forearm-plethysmography.samples.json' with { type: 'json' };
import bloodSample from './blood-sample.json' with { type: 'json' };
import bloodSampleSamples from './blood-sample.samples.json' with { type: 'json' };
import viscometry from './viscometry.json' with { type: 'json' };
import viscometrySamples from './viscometry.samples.json' with { type: 'json' };
import bloodExchange from './blood-exchange.json' with { type: 'json' };
import bloodExchangeSamples from './blood-exchange.samples.json' with { type: 'json' };
import handgripDoppler from './handgrip-doppler.json' with { type: 'json' };
import handgripDopplerSamples from './handgrip-doppler.samples.json' with { type: 'json' };
import flowMediatedDilation from './flow-mediated-dilation.json' with { type: 'json' };
import flowMediatedDilationSamples from './flow-mediated-dilation.samples.json' with { type: 'json' };
import coldPressor from './cold-pressor.json' with { type: 'json' };
import coldPressorSamples from './cold-pressor.samples.json' with { type: 'json' };
import drugInfusion from './drug-infusion.json' with { type: 'json' };
import drugInfusionSamples from './drug-infusion.samples.json' with { type: 'json' };
import oralDose from './oral-dose.json' with { type: 'json' };
import oralDoseSamples from './oral-dose.samples.json' with { type: 'json' };
import cardiacOutput from './cardiac-output.json' with { type: 'json' };
import cardiacOutputSamples from './cardiac-output.samples.json' with { type: 'json' };
import concomitantMedication from './concomitant-medication.json' with { type: 'json' };
import concomitantMedicationSamples from './concomitant-medication.samples.json' with { type: 'json' };
import adverseEvent from './adverse-event.json' with { type: 'json' };
import adverseEventSamples from './adverse-event.samples.json' with { type: 'json' };
import protocolDeviation from './protocol-deviation.json' with { type: 'json' };
import protocolDeviationSamples from './protocol-deviation.samples.json' with { type: 'json' };
import blindingGuess from './blinding-guess.json' with { type: 'json' };
import blindingGuessSamples from './blinding-guess.samples.json' with { type: 'json' };
import endOfParticipation from './end-of-participation.json' with { type: 'json' };
import endOfParticipationSamples from './end-of-participation.samples.json' with { type: 'json' };

/** An instrument of the library with the sample values that prove it. */
export interface LibraryInstrument {
  key: string;
  title: string;
  schema: InstrumentSchema;
  samples: SampleEntry[];
}

/**
 * The instruments that come with the product, in the order in which a study meets them.
 * A study copies one to its drafting table; a test runs every sample through the same check as a publication.
 */
export const libraryInstruments: readonly LibraryInstrument[] = [
  instrument(consent, consentSamples),
  instrument(preVisitChecks, preVisitChecksSamples),
  instrument(demographicsAndAnthropometry, demographicsAndAnthropometrySamples),
  instrument(roomAndCalibrationLog, roomAndCalibrationLogSamples),
  instrument(restingPressures, restingPressuresSamples),
  instrument(forearmPlethysmography, forearmPlethysmographySamples),
  instrument(bloodSample, bloodSampleSamples),
  instrument(viscometry, viscometrySamples),
  instrument(bloodExchange, bloodExchangeSamples),
  instrument(handgripDoppler, handgripDopplerSamples),
  instrument(flowMediatedDilation, flowMediatedDilationSamples),
  instrument(coldPressor, coldPressorSamples),
  instrument(drugInfusion, drugInfusionSamples),
  instrument(oralDose, oralDoseSamples),
  instrument(cardiacOutput, cardiacOutputSamples),
  instrument(concomitantMedication, concomitantMedicationSamples),
  instrument(adverseEvent, adverseEventSamples),
  instrument(protocolDeviation, protocolDeviationSamples),
  instrument(blindingGuess, blindingGuessSamples),
  instrument(endOfParticipation, endOfParticipationSamples),
];

// The type of a JSON file has no literal words (`"type": string`): that the content fits is what the test shows.
function instrument(schema: object, samples: object[]): LibraryInstrument {
  const known = schema as InstrumentSchema;
  return { key: known.instrumentKey, title: known.title, schema: known, samples: samples as SampleEntry[] };
}
