/** Why a value is not there. An instrument may name its own reasons; these are offered where it names none. */
export const missingReasons = [
  { code: 'not-done', label: 'Not done' },
  { code: 'equipment-failure', label: 'Equipment failed' },
  { code: 'participant-declined', label: 'Participant declined' },
  { code: 'participant-unwell', label: 'Participant unwell' },
  { code: 'out-of-time', label: 'No time left in the visit' },
  { code: 'sample-unusable', label: 'Sample lost or unusable' },
  { code: 'reading-unusable', label: 'No usable reading' },
  { code: 'not-applicable', label: 'Not applicable' },
  { code: 'unknown', label: 'Unknown' },
] as const;

/** The words for a missing reason; a reason of the instrument's own is already in words. */
export function missingReasonLabel(reason: string): string {
  return missingReasons.find((known) => known.code === reason)?.label ?? reason;
}
