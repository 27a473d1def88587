/** A number as a person wrote it: JSON knows no trailing zeros, so the digits are kept as text beside the value. */
export interface WrittenNumber {
  value: number;
  written: string;
}

/** Why a text is no number, and the number that was probably meant where it can be said. */
export interface WrittenProblem {
  code: 'blank' | 'decimal-comma' | 'ambiguous' | 'out-of-range' | 'not-a-number';
  message: string;
  /** For a decimal comma: what a person is asked to confirm. */
  suggestion?: string;
}

const plain = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d{1,3})?$/;

/**
 * Reads a typed number without guessing (DE-07): `118.50` stays as written, `5,50` is asked back,
 * `1.234,5` is refused. A minus from a word processor (−) is read as one.
 */
export function parseWrittenNumber(text: string): WrittenNumber | WrittenProblem {
  const written = text.trim().replace(/^\u2212/, '-');
  if (written === '')
    return { code: 'blank', message: 'Nothing was written: give a number or a reason why it is missing' };
  if (!plain.test(written)) return explain(written);
  const value = Number(written);
  if (!Number.isFinite(value)) return { code: 'out-of-range', message: `${written} is too large to be kept` };
  if (value === 0 && /[1-9]/.test(written.split(/[eE]/)[0] ?? '')) {
    return { code: 'out-of-range', message: `${written} is too small to be kept` };
  }
  return { value, written };
}

/** Whether a text was read as a number. */
export function isWrittenNumber(result: WrittenNumber | WrittenProblem): result is WrittenNumber {
  return 'value' in result;
}

function explain(written: string): WrittenProblem {
  if (/^[+-]?\d*,\d+$/.test(written)) {
    // Three digits after the comma may be thousands as well: 1,234.
    if (/^[+-]?[1-9]\d{0,2},\d{3}$/.test(written)) {
      return {
        code: 'ambiguous',
        message: `${written} can be read in two ways: write it with a decimal point`,
      };
    }
    const suggestion = written.replace(',', '.');
    return {
      code: 'decimal-comma',
      message: `${written} has a decimal comma: is ${suggestion} meant?`,
      suggestion,
    };
  }
  if (/^[+-]?[\d.,\s'’]+$/.test(written) && /\d/.test(written)) {
    return {
      code: 'ambiguous',
      message: `${written} can be read in several ways: write it with one decimal point and no separators`,
    };
  }
  return { code: 'not-a-number', message: `${written} is not a number` };
}
