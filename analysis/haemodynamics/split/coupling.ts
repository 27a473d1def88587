import { cautions } from '../../cautions/cautions.ts';
import type { Caution } from '../../cautions/cautions.ts';

const terms = {
  pressure: ['pressure'],
  flow: ['flow'],
  haematocrit: ['haematocrit'],
  plasmaViscosity: ['plasmaViscosity'],
  viscosity: ['haematocrit', 'plasmaViscosity'],
  resistance: ['pressure', 'flow'],
  conductance: ['pressure', 'flow'],
  hindrance: ['pressure', 'flow', 'haematocrit', 'plasmaViscosity'],
} as const;

export type CoupledQuantity = keyof typeof terms;

/**
 * Whether two quantities of the split share a measured term, so that they correlate by construction.
 *
 * Formula  shared measured terms of ln Z = ln P − ln Q − ln η(H, η_p) and its parts
 * Shape    scalars
 * Errors   DomainError naming the argument; never NaN
 * Source   haemodynamics reference 6.6
 */
export function couplingCautions(one: CoupledQuantity, other: CoupledQuantity): Caution[] {
  const shared = terms[one].some((term) => (terms[other] as readonly string[]).includes(term));
  return cautions([one !== other && shared && 'MATHEMATICAL_COUPLING']);
}
