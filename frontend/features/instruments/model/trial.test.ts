import { describe, expect, it } from 'vitest';
import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import { libraryInstruments } from '#schemas/instruments/library/index.ts';
import { library } from './library.ts';
import { trialOf, tried, valuesOf, withOperation, type Trial } from './trial.ts';

const { schema, samples } =
  libraryInstruments.find(({ key }) => key === 'resting-pressures') ?? expect.fail('no resting pressures');
const compiled = compilePublished(schema, library);

describe('a trial at the drafting table', () => {
  it('takes changes of the form as an entry would, and gives them as a sample keeps them', () => {
    let trial: Trial = {};
    trial = withOperation(trial, { pointer: '/systolic/0', value: 118.5, written: '118.50' });
    trial = withOperation(trial, { pointer: '/systolic/0', rejected: 'movement' });
    trial = withOperation(trial, { pointer: '/arm', missing: 'not-done' });
    trial = withOperation(trial, { pointer: '/device', value: 'A' });
    trial = withOperation(trial, { pointer: '/device', value: null });
    trial = withOperation(trial, { pointer: '/noSuchField', value: 1 });
    expect(trial['/systolic/0']).toEqual({ value: 118.5, written: '118.50' });
    expect(valuesOf(compiled, trial)).toEqual({
      '/systolic/0': 118.5,
      '/systolic/0!rejected': 'movement',
      '/arm': { missing: 'not-done' },
    });
    expect(withOperation(trial, { pointer: '/systolic/0', rejected: null })).not.toHaveProperty(
      '/systolic/0!rejected',
    );
  });

  it('shows what the record would derive: the library’s own samples come out as they say', () => {
    const sample = samples[0] ?? expect.fail('no sample');
    const { values, findings } = tried(compiled, trialOf(sample.values));
    expect(findings).toEqual([]);
    for (const [pointer, expected] of Object.entries(sample.expect.derived ?? {})) {
      expect(values[pointer], pointer).toMatchObject({ value: expected });
    }
    expect(Object.keys(sample.expect.derived ?? {}).length).toBeGreaterThan(0);
  });
});
