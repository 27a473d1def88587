import { expect, it } from 'vitest';
import { quantity } from '../../units/quantity.ts';
import { cellVolumeAfter } from './cell-volume-after.ts';
import { cellVolumeChange } from './cell-volume-change.ts';
import { bloodVolumeAfter } from './blood-volume-after.ts';
import { plasmaVolumeChange } from './plasma-volume-change.ts';

const [hbBefore, hbAfter] = [quantity<'g/dL'>(15.1), quantity<'g/dL'>(16.7)];
const [hctBefore, hctAfter] = [quantity<'1'>(0.437), quantity<'1'>(0.453)];

it('the closed form is blood less cells, before and after', () => {
  const plasmaBefore = 100 * (1 - hctBefore);
  const plasmaAfter = bloodVolumeAfter(hbBefore, hbAfter) - cellVolumeAfter(hbBefore, hbAfter, hctAfter);
  expect(plasmaVolumeChange(hbBefore, hbAfter, hctBefore, hctAfter)).toBeCloseTo(
    100 * (plasmaAfter / plasmaBefore - 1),
    12,
  );
});

it('cells keep their volume when haematocrit follows haemoglobin', () => {
  const follows = quantity<'1'>((hctBefore * hbAfter) / hbBefore);
  expect(cellVolumeChange(hbBefore, hbAfter, hctBefore, follows)).toBeCloseTo(0, 12);
});

it('nothing changes between equal samples', () => {
  expect(plasmaVolumeChange(hbBefore, hbBefore, hctBefore, hctBefore)).toBeCloseTo(0, 12);
});

it.each([
  [{ bloodLoss: quantity<'mL'>(1) }, /bloodLoss/],
  [{ transfusion: quantity<'mL'>(300) }, /transfusion/],
  [{ bloodLoss: quantity<'mL'>(-1) }, /bloodLoss/],
])('is refused across %o', (events, named) => {
  expect(() => plasmaVolumeChange(hbBefore, hbAfter, hctBefore, hctAfter, events)).toThrow(named);
});
