import { afterAll, describe, expect, it } from 'vitest';
import { libraryInstruments } from '#schemas/instruments/library/index.ts';
import { checkDraft, closeCheckingPool, evaluateEntryInThread, makeValidatorCode } from './checking.pool.ts';

const { schema, samples } =
  libraryInstruments.find(({ key }) => key === 'resting-pressures') ?? expect.fail('no resting pressures');

afterAll(closeCheckingPool);

// proves WS-10
describe('the checking threads', () => {
  it('check a draft and run its samples', async () => {
    const verdict = await checkDraft(JSON.stringify(schema), samples);
    expect(verdict).toMatchObject({ publishable: true, problems: [] });
    expect(verdict.samples).toHaveLength(samples.length);
  });

  it('judge and derive an entry', async () => {
    const { derived, findings } = await evaluateEntryInThread(schema, samples[0]?.values ?? {}, 'complete');
    expect(findings).toEqual([]);
    expect(derived['/meanArterialPressure']).toMatchObject({ value: 91, unit: 'mm[Hg]' });
  });

  it('make the browser’s validator', async () => {
    expect(await makeValidatorCode(schema)).toContain('export default (require) =>');
  });

  it('are not even asked about what is too deep', async () => {
    const text = `{"a":${'['.repeat(10_000)}${']'.repeat(10_000)}}`;
    expect((await checkDraft(text, [])).problems[0]?.message).toContain('nested more than');
  });

  it('are ended past the limit, and others take their place', async () => {
    const late = await checkDraft(JSON.stringify(schema), samples, { timeLimit: 1 });
    expect(late.problems[0]?.message).toContain('was ended');
    expect((await checkDraft(JSON.stringify(schema), samples)).publishable).toBe(true);
  });

  it('leave the main thread free while they work', async () => {
    const work = Promise.all(
      libraryInstruments.map((one) => checkDraft(JSON.stringify(one.schema), one.samples)),
    );
    let beats = 0;
    const beat = setInterval(() => (beats += 1), 5);
    const verdicts = await work;
    clearInterval(beat);
    expect(verdicts.every(({ publishable }) => publishable)).toBe(true);
    expect(beats).toBeGreaterThan(20);
  });
});
