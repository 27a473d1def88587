import { describe, expect, it } from 'vitest';
import { schemes, type Token } from '../tailwind.config.ts';

/** Text 4.5:1, controls, focus and marks 3:1 (WCAG 2.2, 1.4.3 and 1.4.11). Rules are ornament and carry nothing. */
const text: [Token, Token[]][] = [
  ['soot', ['bone', 'paper', 'arterial-wash', 'venous-wash', 'moss-wash']],
  ['ink', ['bone', 'paper', 'rule-soft', 'arterial-wash', 'venous-wash', 'moss-wash', 'straw-wash']],
  ['ink-soft', ['bone', 'paper', 'arterial-wash', 'venous-wash', 'straw-wash']],
  ['arterial', ['bone', 'paper', 'arterial-wash', 'rule-soft']],
  ['arterial-deep', ['bone', 'paper']],
  ['on-arterial', ['arterial', 'arterial-deep']],
  ['venous', ['bone', 'paper', 'venous-wash', 'straw-wash', 'arterial-wash']],
  ['straw', ['paper', 'straw-wash']],
  ['straw-ink', ['straw-wash']],
  ['moss', ['bone', 'paper', 'moss-wash']],
  ['chalk', ['band', 'band-field']],
  ['chalk-soft', ['band', 'band-field']],
];
const marks: [Token, Token[]][] = [
  ['edge', ['bone', 'paper', 'straw-wash']],
  ['clay', ['bone', 'paper']],
  ['venous', ['bone', 'paper', 'rule-soft']],
  ['moss', ['rule-soft']],
  ['band-edge', ['band', 'band-field']],
  ['chalk', ['band']],
];

const channel = (value: number) => (value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4);

/** Relative luminance of `#rrggbb`, WCAG 2.2 definition. */
function luminance(hex: string): number {
  const [red, green, blue] = [1, 3, 5].map((at) => channel(parseInt(hex.slice(at, at + 2), 16) / 255));
  return 0.2126 * red! + 0.7152 * green! + 0.0722 * blue!;
}

function contrast(one: string, other: string): number {
  const [light, dark] = [luminance(one), luminance(other)].sort((a, b) => b - a);
  return (light! + 0.05) / (dark! + 0.05);
}

const pairs = (list: [Token, Token[]][]) =>
  list.flatMap(([front, backs]) => backs.map((back) => [front, back] as const));

// proves AX-04
describe.each(Object.entries(schemes))('the %s scheme', (_name, scheme) => {
  it.each(pairs(text))('reads as text: %s on %s', (front, back) => {
    expect(contrast(scheme[front], scheme[back])).toBeGreaterThanOrEqual(4.5);
  });

  it.each(pairs(marks))('is seen as a mark: %s on %s', (front, back) => {
    expect(contrast(scheme[front], scheme[back])).toBeGreaterThanOrEqual(3);
  });
});

describe('contrast', () => {
  it('agrees with the ends of the scale that WCAG gives: black on white is 21, a colour on itself 1', () => {
    expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 10);
    expect(contrast('#777777', '#777777')).toBe(1);
  });

  it('agrees with the known grey that just passes on white (#767676, 4.54, common practice)', () => {
    expect(contrast('#767676', '#ffffff')).toBeCloseTo(4.54, 2);
  });
});
