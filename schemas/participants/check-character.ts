const characters = '0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ*';
const modulus = 37;
const radix = 2;

/**
 * Check character of ISO/IEC 7064, MOD 37-2 (pure system).
 *
 * Chosen over MOD 37,36: 2 generates the multiplicative group modulo 37, so every change of one character and
 * every exchange of two, neighbours or not, is found; the hybrid system misses some exchanges.
 *
 * @param text digits and capital letters, at most 36 of them
 * @returns one of `0-9A-Z*`
 * @throws RangeError for any other character
 * Source: ISO/IEC 7064; worked example of the UK blood services, see the test
 */
export function checkCharacter(text: string): string {
  let sum = 0;
  for (const character of text) {
    const value = characters.indexOf(character);
    if (value < 0 || character === '*') {
      throw new RangeError('A check character is made of digits and capital letters.');
    }
    sum = ((sum + value) * radix) % modulus;
  }
  return characters.charAt((modulus + 1 - sum) % modulus);
}
