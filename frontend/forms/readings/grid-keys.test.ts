import { describe, expect, it } from 'vitest';
import { placeAfterKey } from './grid-keys.ts';

const arms = { fields: 2, readings: 8, readingsAcross: true };
const pressures = { fields: 3, readings: 3, readingsAcross: false };
const whole = { atStart: true, atEnd: true };
const inside = { atStart: false, atEnd: false };

describe('placeAfterKey', () => {
  it('leads by Enter to the next reading of the same field, and after the last to the next field', () => {
    expect(placeAfterKey('Enter', { field: 0, reading: 2 }, arms, inside)).toEqual({ field: 0, reading: 3 });
    expect(placeAfterKey('Enter', { field: 0, reading: 7 }, arms, inside)).toEqual({ field: 1, reading: 0 });
    expect(placeAfterKey('Enter', { field: 1, reading: 7 }, arms, inside)).toBeUndefined();
    expect(placeAfterKey('Enter', { field: 1, reading: 0 }, pressures, inside)).toEqual({
      field: 1,
      reading: 1,
    });
  });

  it('goes by arrows to the neighbour that is seen there, whichever way the grid lies', () => {
    expect(placeAfterKey('ArrowDown', { field: 0, reading: 2 }, arms, whole)).toEqual({
      field: 1,
      reading: 2,
    });
    expect(placeAfterKey('ArrowRight', { field: 0, reading: 2 }, arms, whole)).toEqual({
      field: 0,
      reading: 3,
    });
    expect(placeAfterKey('ArrowDown', { field: 0, reading: 0 }, pressures, whole)).toEqual({
      field: 0,
      reading: 1,
    });
    expect(placeAfterKey('ArrowLeft', { field: 2, reading: 1 }, pressures, whole)).toEqual({
      field: 1,
      reading: 1,
    });
  });

  it('stays inside the grid', () => {
    expect(placeAfterKey('ArrowUp', { field: 0, reading: 2 }, arms, whole)).toBeUndefined();
    expect(placeAfterKey('ArrowRight', { field: 0, reading: 7 }, arms, whole)).toBeUndefined();
  });

  it('moves the caret before it leaves the text', () => {
    expect(
      placeAfterKey('ArrowRight', { field: 0, reading: 2 }, arms, { atStart: true, atEnd: false }),
    ).toBeUndefined();
    expect(
      placeAfterKey('ArrowLeft', { field: 0, reading: 2 }, arms, { atStart: false, atEnd: true }),
    ).toBeUndefined();
  });

  it('leaves other keys alone', () => {
    expect(placeAfterKey('5', { field: 0, reading: 2 }, arms, whole)).toBeUndefined();
  });
});
