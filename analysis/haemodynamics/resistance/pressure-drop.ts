import { DomainError } from '../../units/errors.ts';
import { quantity } from '../../units/quantity.ts';
import type { Quantity } from '../../units/quantity.ts';
import { requireFinite } from '../../units/require.ts';

/** The pressure that drives flow through a bed; must be above 0, or the bed has no resistance that can be computed. */
export function pressureDrop(
  upstream: Quantity<'mm[Hg]'>,
  downstream: Quantity<'mm[Hg]'>,
  names: { readonly upstream: string; readonly downstream: string },
): Quantity<'mm[Hg]'> {
  requireFinite(names.upstream, upstream);
  requireFinite(names.downstream, downstream);
  if (upstream <= downstream) {
    throw new DomainError(
      names.upstream,
      `above ${names.downstream} (${downstream})`,
      upstream,
      'Check zero level and units of both pressures; without a driving pressure there is no resistance.',
    );
  }
  return quantity(upstream - downstream);
}
