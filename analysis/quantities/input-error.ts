/** A request that names no known quantity, or gives it too few, too many or unreadable inputs. */
export class InputError extends Error {
  constructor(
    readonly code: 'unknown_quantity' | 'missing_input' | 'unknown_input' | 'invalid_input',
    message: string,
    readonly remedy: string,
    readonly argument?: string,
  ) {
    super(message);
    this.name = 'InputError';
  }
}
