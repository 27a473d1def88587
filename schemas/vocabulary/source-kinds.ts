/** What a source document shows; chosen from a list, because a file's own name may tell who the participant is. */
export const sourceKinds = {
  'paper-form': 'paper form',
  'plethysmograph-trace': 'plethysmograph trace',
  'pressure-print': 'pressure monitor print',
  'laboratory-report': 'laboratory report',
  'ultrasound-report': 'ultrasound report',
  'consent-form': 'consent form',
  other: 'other source',
} as const;
export type SourceKind = keyof typeof sourceKinds;

export const attestations = {
  original: 'original file',
  'compared-with-original': 'copy, compared with the original',
  'uncertified-copy': 'uncertified copy',
} as const;
export type Attestation = keyof typeof attestations;

/** What may be uploaded: by content, not by name. */
export const sourceTypes = ['application/pdf', 'image/png', 'image/jpeg', 'text/csv'] as const;
export type SourceType = (typeof sourceTypes)[number];

/** Bytes. */
export const sourceLimit = 25 * 1024 ** 2;
