import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { expressionCompiler, type Expression } from './expression.ts';
import type { ExpressionScope, ExpressionType, ExpressionVariables } from './expression-types.ts';

const variables: ExpressionVariables = {
  systolic: 'list<double>',
  diastolic: 'list<double>',
  meanPressure: 'double',
  age: 'int',
  hand: 'string',
  supine: 'bool',
  cuff: { width: 'double', position: { height: 'double' } },
};
const compiler = expressionCompiler(variables);

function compiled(text: string, expected: ExpressionType): Expression {
  const result = compiler.compile(text, expected);
  if ('problems' in result) throw new Error(JSON.stringify(result.problems));
  return result;
}

function problemOf(text: string, expected: ExpressionType = 'double') {
  const result = compiler.compile(text, expected);
  if (!('problems' in result)) throw new Error(`"${text}" was accepted`);
  return result.problems[0] ?? expect.fail('no problem given');
}

const valueOf = (text: string, scope: ExpressionScope, expected: ExpressionType = 'double') =>
  compiled(text, expected).evaluate(scope);

describe('an expression', () => {
  it('computes the one-third mean pressure (120/80 gives 93.33, textbook)', () => {
    const scope = { systolic: [120, 120], diastolic: [80, 80] };
    const result = valueOf('mean(diastolic) + (mean(systolic) - mean(diastolic)) / 3.0', scope);
    expect(result).toEqual({ value: expect.closeTo(93.333333, 5) as number });
  });

  it('reads its fields from the syntax tree, in groups too, and leaves out names that a macro binds', () => {
    expect(compiled('systolic.all(x, x > meanPressure)', 'bool').dependencies).toEqual([
      'systolic',
      'meanPressure',
    ]);
    expect(compiled('cuff.width + cuff["width"] + cuff.position.height', 'double').dependencies).toEqual([
      'cuff.width',
      'cuff.position.height',
    ]);
  });

  it('takes whole-number fields as whole numbers', () => {
    expect(valueOf('double(age) / 2.0', { age: 45 })).toEqual({ value: 22.5 });
    expect(valueOf('age >= 18 && age < 65', { age: 45 }, 'bool')).toEqual({ value: true });
    expect(valueOf('age + 1', { age: 45 }, 'int')).toEqual({ value: 46 });
  });

  it('gives a reason instead of a number that is not finite', () => {
    expect(valueOf('1.0 / meanPressure', { meanPressure: 0 })).toHaveProperty('problem');
    expect(valueOf('log(meanPressure)', { meanPressure: 0 })).toHaveProperty('problem');
    expect(valueOf('sqrt(meanPressure)', { meanPressure: -1 })).toHaveProperty('problem');
    expect(valueOf('sd(systolic)', { systolic: [120] })).toEqual({
      problem: expect.stringContaining('at least 2 readings') as string,
    });
    expect(valueOf('systolic[2]', { systolic: [120] })).toHaveProperty('problem');
    expect(valueOf('minutesBetween(hand, "09:05")', { hand: 'soon' })).toEqual({
      problem: expect.stringContaining('09:05') as string,
    });
  });

  // Values by hand: mean 5, squares about it 32 over 7; published worked example of the population SD 2 (n).
  it('offers the functions of a laboratory', () => {
    const readings = [2, 4, 4, 4, 5, 5, 7, 9];
    expect(valueOf('mean(systolic)', { systolic: readings })).toEqual({ value: 5 });
    expect(valueOf('sd(systolic)', { systolic: readings })).toEqual({
      value: expect.closeTo(Math.sqrt(32 / 7), 12) as number,
    });
    expect(valueOf('median(systolic)', { systolic: readings })).toEqual({ value: 4.5 });
    expect(valueOf('median(systolic)', { systolic: [9, 1, 4] })).toEqual({ value: 4 });
    expect(valueOf('max(systolic) - min(systolic)', { systolic: readings })).toEqual({ value: 7 });
    expect(valueOf('round(meanPressure, 2)', { meanPressure: 1.005 })).toEqual({ value: 1.01 });
    expect(valueOf('round(meanPressure)', { meanPressure: -2.5 })).toEqual({ value: -3 });
    expect(valueOf('round(meanPressure, 3)', { meanPressure: 4e-7 })).toEqual({ value: 0 });
    expect(valueOf('minutesBetween("09:05", hand)', { hand: '10:20' })).toEqual({ value: 75 });
    expect(
      valueOf('eachAbove(systolic, diastolic)', { systolic: [120, 90], diastolic: [80, 95] }, 'bool'),
    ).toEqual({
      value: false,
    });
  });

  it('keeps the mean within its readings and unmoved by their order', () => {
    fc.assert(
      fc.property(
        fc.array(fc.double({ min: 1, max: 300, noNaN: true }), { minLength: 1, maxLength: 20 }),
        (readings) => {
          const result = valueOf('mean(systolic)', { systolic: readings }) as { value: number };
          expect(result.value).toBeGreaterThanOrEqual(Math.min(...readings) - 1e-9);
          expect(result.value).toBeLessThanOrEqual(Math.max(...readings) + 1e-9);
        },
      ),
    );
  });
});

describe('a refused expression', () => {
  it.each([
    ['meanPressure / 3', 'double', 'write 3.0'],
    ['age / 3.0', 'double', 'double(…)'],
    ['systolic > 3.0', 'bool', 'mean(…)'],
    ['meanPresure + 1.0', 'double', 'did you mean meanPressure?'],
    ['cuff.widht', 'double', 'There is no field'],
    ['cuff', 'double', 'is a group'],
    ['meanPressure = 3.0', 'bool', 'Write =='],
    ['supine and supine', 'bool', '&&'],
    ['meanPressure', 'bool', 'true or false'],
    ['age', 'double', 'double(…)'],
    ['mean(meanPressure)', 'double', 'take readings'],
    ['1.0 +', 'double', 'cannot be read'],
  ] as const)('%s tells the author what to write', (text, expected, words) => {
    expect(problemOf(text, expected).message).toContain(words);
  });

  it('says where', () => {
    const text = 'meanPressure + systole';
    expect(text.slice(problemOf(text).start, problemOf(text).end)).toBe('systole');
  });

  // proves WS-10
  it.each([
    'hand.matches("(a+)+$")',
    'systolic.all(a, systolic.all(b, systolic.all(c, true)))',
    'hand.split("").join(hand) == ""',
    'cel.bind(x, hand + hand, x + x) == ""',
    '(systolic + systolic).all(x, x > 0.0)',
    'timestamp(hand) == timestamp(hand)',
    `${'('.repeat(200)}true${')'.repeat(200)}`,
    `true${' && true'.repeat(600)}`,
    'x'.repeat(3000),
  ])('is one that could run without bound: %#', (text) => {
    expect(compiler.compile(text, 'bool')).toHaveProperty('problems');
  });

  it('may go over readings within readings, once', () => {
    const peak = compiled('systolic.exists(a, diastolic.all(b, a > b))', 'bool');
    expect(peak.evaluate({ systolic: [80, 120], diastolic: [90, 100] })).toEqual({ value: true });
  });
});
