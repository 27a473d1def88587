import type { HiddenValue, ValueDto } from '#schemas/api/capture.ts';
import { parseAddress } from '#schemas/instruments/address.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { isMissing } from '#schemas/instruments/entry-values.ts';
import { cautionCodes } from '#analysis/cautions/cautions.ts';
import { currentActor } from '#backend/http/actor.ts';
import type { StoredValue } from './entry-values.ts';

/** Whether the actor may see what lies at an address of this instrument. */
export function mayKnow(compiled: CompiledInstrument, address: string): boolean {
  const field = compiled.field(parseAddress(address)?.pointer ?? '');
  return currentActor().unblinded || field?.level === 'open';
}

/** A value as it leaves: in full, or hidden in its place. Redacted ones say nothing but that. */
export function presentValue(compiled: CompiledInstrument, stored: StoredValue): ValueDto | HiddenValue {
  if (!mayKnow(compiled, stored.address)) return { hidden: true };
  const { value, written, derivation } = stored;
  if (value === null) return {};
  if (isMissing(value)) return { missing: value.missing };
  const unit = compiled.field(parseAddress(stored.address)?.pointer ?? '')?.unit;
  return {
    value,
    ...(written === null ? {} : { written }),
    ...(unit === undefined || stored.address.includes('!') ? {} : { unit }),
    ...(derivation === null
      ? {}
      : {
          rule: `${derivation.rule} ${derivation.version}`,
          cautions: derivation.cautions.map((code) => ({ code, message: messageOf(code) })),
        }),
  };
}

/** The sentence behind a caution's code; one of an instrument's own rules says itself. */
const messageOf = (code: string): string =>
  code in cautionCodes ? cautionCodes[code as keyof typeof cautionCodes][1] : code.replaceAll('-', ' ');
