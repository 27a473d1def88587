/** A reason why the start cannot go on that the person at the terminal can mend; shown without a stack. */
export class StartError extends Error {
  override name = 'StartError';
}

/** Tells the person at the terminal what is being done. */
export type Say = (text: string) => void;
