import { plausibleFlow } from './plausible-flow.ts';
import type { FlowOptions } from './plausible-flow.ts';
import { DomainError } from '../../units/errors.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite, requirePositive } from '../../units/require.ts';

/**
 * Forearm blood flow from the slope of an uncalibrated signal and a calibration step at the same gain.
 *
 * Formula  FBF = 60 s · cal% / deflection
 * Units    s signal unit per s, deflection in the same signal unit, cal % , FBF mL/min/dL
 * Shape    scalars
 * Domain   deflection and calibration step not 0 and of one sign with the slope; 0 < FBF ≤ 100 unless hyperaemia is confirmed
 * Errors   DomainError naming the argument; never NaN
 * Assumes  linear gauge, no change of gain between calibration and reading
 * Source   Hokanson 1975 (principle of the electrical step, by citation); reference case hd-002
 */
export function forearmBloodFlowFromCalibratedSlope(
  slope: number,
  calibrationDeflection: number,
  calibrationPercent: Quantity<'%'>,
  options: FlowOptions = {},
): Quantity<'mL/min/dL'> {
  requireFinite('slope', slope);
  requireFinite('calibrationDeflection', calibrationDeflection);
  if (calibrationDeflection === 0) {
    throw new DomainError(
      'calibrationDeflection',
      'other than 0',
      0,
      'Calibrate the gauge at this gain and read again.',
    );
  }
  requirePositive('calibrationPercent', calibrationPercent);
  return plausibleFlow((60 * slope * calibrationPercent) / calibrationDeflection, options);
}
