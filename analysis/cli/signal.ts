import { readFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { arterialPressure } from '../signals/arterial-pressure/arterial-pressure.ts';
import { parseRecord } from '../signals/parse-record.ts';
import type { SignalRecord } from '../signals/parse-record.ts';
import { plethysmographReadings, slopeVersion } from '../signals/plethysmograph/plethysmograph.ts';
import { SignalError } from '../signals/signal-error.ts';
import { DomainError } from '../units/errors.ts';

const usage =
  'Usage: signal arterial-pressure --data FILE, or signal plethysmograph --data FILE ' +
  '[--calibration-deflection D --calibration-percent P] [--skip S] [--cycles N] [--window S].';

/** One JSON object on standard output; exit 0 with a result, 2 for a record or arguments that cannot be used. */
process.exitCode = main();

function main(): number {
  try {
    const { kind, options } = readArguments();
    const record = parseRecord(readText(options.data));
    return print(kind === 'arterial-pressure' ? pressureOf(record) : flowOf(record, options), 0);
  } catch (error) {
    if (error instanceof SignalError) {
      const { code, message, row } = error;
      return print({ error: { code, message, ...(row !== undefined && { row }) } }, 2);
    }
    if (error instanceof DomainError) {
      return print({ error: { code: error.code, message: error.message, argument: error.argument } }, 2);
    }
    throw error;
  }
}

type Options = ReturnType<typeof readArguments>['options'];

function readArguments() {
  try {
    const { values: options, positionals } = parseArgs({
      allowPositionals: true,
      options: {
        data: { type: 'string' },
        'calibration-deflection': { type: 'string' },
        'calibration-percent': { type: 'string' },
        skip: { type: 'string' },
        cycles: { type: 'string' },
        window: { type: 'string' },
      },
    });
    const [kind] = positionals;
    if (positionals.length === 1 && (kind === 'arterial-pressure' || kind === 'plethysmograph'))
      return { kind, options };
  } catch {
    // An option that is not known is answered with the usage, as a missing one is.
  }
  throw new SignalError('invalid_arguments', usage);
}

function readText(path: string | undefined): string {
  if (path === undefined) throw new SignalError('invalid_arguments', usage);
  try {
    return readFileSync(path, 'utf8');
  } catch {
    throw new SignalError('unreadable_file', 'The data file cannot be read.');
  }
}

function pressureOf(record: SignalRecord) {
  const signal = record.signal(['arterial', 'abp', 'pressure', 'bp']);
  if (!signal) throw new SignalError('missing_column', 'No column is named pressure.');
  const found = arterialPressure(signal);
  const pressure = (value: number) => ({ value, unit: 'mm[Hg]' });
  return {
    time_mean: pressure(found.timeMean),
    mean_of_whole_beats: pressure(found.meanOfWholeBeats),
    systolic: pressure(found.systolic),
    diastolic: pressure(found.diastolic),
    heart_rate: { value: found.heartRate, unit: '/min' },
    beats: { value: found.upstrokes, unit: '1' },
    whole_beats: { value: found.beats.length, unit: '1' },
    form_factor: { value: found.formFactor, unit: '1' },
    duration: { value: found.duration, unit: 's' },
    sampling_rate: { value: found.samplingRate, unit: '/s' },
    cautions: found.cautions,
    beat_list: found.beats,
    beat_list_units: { start: 's', end: 's', systolic: 'mm[Hg]', diastolic: 'mm[Hg]', mean: 'mm[Hg]' },
  };
}

function flowOf(record: SignalRecord, options: Options) {
  const signal = record.signal(['volume', 'strain', 'gauge', 'pleth']);
  if (!signal)
    throw new SignalError('missing_column', 'No column is named volume, strain, gauge or plethysmograph.');
  const cuff = record.signal(['cuff']);
  const [deflection, percent] = [
    number(options, 'calibration-deflection'),
    number(options, 'calibration-percent'),
  ];
  if ((deflection === undefined) !== (percent === undefined)) {
    throw new SignalError('calibration_missing', 'A calibration needs both its deflection and its percent.');
  }
  const readings = plethysmographReadings(signal, {
    ...(cuff && { cuff }),
    ...(deflection !== undefined && percent !== undefined && { calibration: { deflection, percent } }),
    ...definedOnly({
      skip: number(options, 'skip'),
      cycles: number(options, 'cycles'),
      fixedWindow: number(options, 'window'),
    }),
  });
  return {
    version: slopeVersion,
    readings: readings.map(({ phase, window, ...reading }) => ({
      onset: { value: phase.onset, unit: 's' },
      release: { value: phase.release, unit: 's' },
      window: { ...window, unit: 's' },
      slope: { value: reading.slope, unit: '%/s' },
      standard_error: { value: reading.standardError, unit: '%/s' },
      r_squared: { value: reading.rSquared, unit: '1' },
      flow: reading.flow === undefined ? null : { value: reading.flow, unit: 'mL/min/dL' },
      flow_standard_error: { value: reading.flowStandardError, unit: 'mL/min/dL' },
      usable: reading.usable,
      cautions: reading.cautions,
    })),
  };
}

function number(options: Options, name: Exclude<keyof Options, 'data'>): number | undefined {
  const text = options[name];
  if (text === undefined) return undefined;
  const value = Number(text);
  if (text.trim() === '' || !Number.isFinite(value)) {
    throw new SignalError('invalid_arguments', `--${name} is not a number.`);
  }
  return value;
}

function definedOnly(
  options: Readonly<Record<string, number | undefined>>,
): Readonly<Record<string, number>> {
  return Object.fromEntries(
    Object.entries(options).flatMap(([key, value]) => (value === undefined ? [] : [[key, value]])),
  );
}

function print(output: unknown, exitCode: number): number {
  process.stdout.write(`${JSON.stringify(output)}\n`);
  return exitCode;
}
