import { parse } from 'csv-parse/browser/esm/sync';
import { expect, it } from 'vitest';
import { delimiterOf } from './delimiter.ts';

it.each([
  [
    'time;flow\n1;2,5',
    [
      ['time', 'flow'],
      ['1', '2,5'],
    ],
  ],
  [
    'time\tflow\r\n1\t2,5',
    [
      ['time', 'flow'],
      ['1', '2,5'],
    ],
  ],
  [
    'time,flow\n1,2.5',
    [
      ['time', 'flow'],
      ['1', '2.5'],
    ],
  ],
  ['time', [['time']]],
])('keeps each cell as written: %j', (text, cells) =>
  expect(parse(text, { delimiter: delimiterOf(text) })).toEqual(cells),
);
