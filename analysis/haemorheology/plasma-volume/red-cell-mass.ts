import { DomainError } from '../../units/errors.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireNotNegative } from '../../units/require.ts';

export interface VolumeEvents {
  /** Blood lost, drawn or exchanged between the two samples. */
  readonly bloodLoss?: Quantity<'mL'>;
  /** Red cells given between the two samples. */
  readonly transfusion?: Quantity<'mL'>;
}

/** The Dill-Costill method assumes that no red cells came or went between the two samples. */
export function requireConstantRedCellMass({ bloodLoss, transfusion }: VolumeEvents): void {
  for (const [argument, volume] of Object.entries({ bloodLoss, transfusion })) {
    if (volume === undefined) continue;
    requireNotNegative(argument, volume);
    if (volume > 0) {
      throw new DomainError(
        argument,
        '0 between the two samples: the method assumes a constant red-cell mass',
        volume,
        'Measure plasma volume by a dilution method across phlebotomy, exchange, bleeding or transfusion.',
      );
    }
  }
}
