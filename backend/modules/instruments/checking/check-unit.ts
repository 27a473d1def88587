import { createRequire } from 'node:module';
import { units } from '#schemas/vocabulary/units.ts';

interface UnitVerdict {
  status: 'valid' | 'invalid' | 'error';
  suggestions?: { units: [code: string, name: string, remark: string][] }[];
}

// The package is CommonJS without types, and loaders disagree on where its default export is.
const { UcumLhcUtils } = createRequire(import.meta.url)('@lhncbc/ucum-lhc') as {
  UcumLhcUtils: { getInstance(): { validateUnitString(code: string, suggest: boolean): UnitVerdict } };
};

/** What authors write for units that they know by another name. */
const slips: Record<string, string> = {
  bpm: '/min',
  'beats/min': '/min',
  cmh2o: 'cm[H2O]',
  fraction: 'L/L',
  kpa: 'kPa',
  'ml/100ml/min': 'mL/min/dL',
  'ml/min/100ml': 'mL/min/dL',
  mmhg: 'mm[Hg]',
  mpas: 'mPa.s',
  percent: '%',
  'wood units': "[wood'U]",
  year: 'a',
  years: 'a',
  '°': 'deg',
  '°c': 'Cel',
  celsius: 'Cel',
};

/** Why a unit is refused, with the code that was probably meant; nothing when it is valid UCUM (IV-09). */
export function unitProblem(code: string): string | undefined {
  // The package writes to the console when a code has blanks.
  const verdict: UnitVerdict = /\s/.test(code)
    ? { status: 'invalid' }
    : UcumLhcUtils.getInstance().validateUnitString(code, true);
  if (verdict.status === 'valid') return undefined;
  const meant = slips[code.toLowerCase()] ?? shownAs(code) ?? verdict.suggestions?.[0]?.units[0]?.[0];
  return `${code} is not a UCUM code${meant === undefined ? '' : `: write ${meant}`}`;
}

function shownAs(code: string): string | undefined {
  return units.find(({ shown }) => shown.toLowerCase() === code.toLowerCase())?.code;
}
