/**
 * Why a reading was set aside: a closed list, so that a reading is never dropped for its size alone.
 * Common practice in venous-occlusion plethysmography, no single source.
 */
export const rejectionReasons = [
  { code: 'movement', label: 'Movement' },
  { code: 'cuff-artefact', label: 'Cuff artefact' },
  { code: 'baseline-not-settled', label: 'Baseline not settled' },
  { code: 'gain-change', label: 'Gain changed' },
  { code: 'ectopic-beats', label: 'Ectopic beats' },
  { code: 'device-error', label: 'Device showed an error' },
  { code: 'sample-clotted', label: 'Sample clotted or leaking' },
  { code: 'other', label: 'Other' },
] as const;

/** The words for a rejection reason; a reason of the instrument's own is already in words. */
export function rejectionReasonLabel(reason: string): string {
  return rejectionReasons.find((known) => known.code === reason)?.label ?? reason;
}
