import { describe, expect, it } from 'vitest';
import { libraryInstruments } from '#schemas/instruments/library/index.ts';
import { checkInstrument } from './check-instrument.ts';
import { instrumentLibrary } from './instrument-library.ts';
import { validatorCode } from './validator-code.ts';

// proves IV-03: the built-in instruments pass the check that a publication passes, samples by hand included.
describe.each(libraryInstruments.map((instrument) => [instrument.key, instrument] as const))(
  '%s',
  (_, instrument) => {
    const verdict = checkInstrument(JSON.stringify(instrument.schema), instrument.samples, instrumentLibrary);

    it('has no problems, and nothing its author should be warned of but 1.0 as an integer', () => {
      expect(verdict.problems).toEqual([]);
      expect(verdict.warnings.filter(({ message }) => !message.includes('1.0'))).toEqual([]);
    });

    it.each(verdict.samples.map((sample) => [sample.name, sample] as const))(
      'sample: %s',
      (_name, sample) => {
        expect(sample.differences).toEqual([]);
      },
    );

    it('has samples that pass, and samples that do not', () => {
      const outcomes = new Set(instrument.samples.map(({ expect: { outcome } }) => outcome));
      expect(outcomes).toContain('passes');
      expect(outcomes.size).toBeGreaterThan(1);
    });

    it('has a validator for the browser', () => {
      expect(validatorCode(instrument.schema)).toContain('export default (require) =>');
    });
  },
);

// proves RB-07
describe('the library', () => {
  it('hides what tells the arm: blood, viscosity, exchange, dose', () => {
    const hidden = libraryInstruments.filter(({ schema }) => schema.unblinding).map(({ key }) => key);
    expect(hidden).toEqual(['blood-sample', 'viscometry', 'blood-exchange', 'drug-infusion', 'oral-dose']);
  });
});
