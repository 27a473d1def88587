import type { Finding } from '#schemas/instruments/check-values.ts';

/** A check on a hidden field says nothing to those it is hidden from. */
export const messageFor = (finding: Finding, unblinded: boolean): string =>
  finding.level === 'unblinding' && !unblinded ? 'A check that only unblinded members see.' : finding.message;
