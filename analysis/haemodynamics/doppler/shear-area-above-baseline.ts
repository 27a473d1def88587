import { trapezoidArea } from '../trapezoid-area.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite } from '../../units/require.ts';

/**
 * Area of the shear rate above its baseline, from cuff release to the time of peak diameter.
 *
 * Formula  ∫ (γ − γ_base) dt, trapezoidal
 * Units    t s, γ /s, result 1
 * Shape    two series of one length, at least 2 points
 * Domain   times strictly rising; shear rates and γ_base finite, below 0 where flow is retrograde
 * Errors   DomainError naming the argument; never NaN
 * Assumes  the series ends at the time of peak diameter
 * Source   definition; reference case hd-111
 */
export function shearAreaAboveBaseline(
  times: readonly Quantity<'s'>[],
  shearRates: readonly Quantity<'/s'>[],
  baseline: Quantity<'/s'>,
): Quantity<'1'> {
  requireFinite('baseline', baseline);
  return quantity(
    trapezoidArea(
      times,
      shearRates.map((rate) => rate - baseline),
      'shearRates',
    ),
  );
}
