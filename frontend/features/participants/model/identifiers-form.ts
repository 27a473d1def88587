import type { IdentifiersBody } from '#schemas/api/participants.ts';

/** Identifiers as text in a form; empty means not given. */
export type IdentifiersDraft = Record<keyof Required<IdentifiersBody>, string>;

export const emptyDraft: IdentifiersDraft = {
  name: '',
  birthDate: '',
  phone: '',
  email: '',
  postcode: '',
  recordNumber: '',
};

export const draftOf = (shown: { [field in keyof IdentifiersDraft]: string | null }): IdentifiersDraft => ({
  name: shown.name ?? '',
  birthDate: shown.birthDate ?? '',
  phone: shown.phone ?? '',
  email: shown.email ?? '',
  postcode: shown.postcode ?? '',
  recordNumber: shown.recordNumber ?? '',
});

/** What is sent: trimmed, and null for what was not given. */
export function bodyOf(draft: IdentifiersDraft): IdentifiersBody {
  const optional = (text: string) => (text.trim() === '' ? null : text.trim());
  return {
    name: draft.name.trim(),
    birthDate: draft.birthDate.trim(),
    phone: optional(draft.phone),
    email: optional(draft.email),
    postcode: optional(draft.postcode),
    recordNumber: optional(draft.recordNumber),
  };
}

/** What is missing before anything is sent, by field. */
export function draftProblems(draft: IdentifiersDraft): Partial<Record<keyof IdentifiersDraft, string>> {
  return {
    ...(draft.name.trim() === '' ? { name: 'Enter the full name.' } : {}),
    ...(/^\d{4}-\d{2}-\d{2}$/.test(draft.birthDate.trim())
      ? {}
      : { birthDate: 'Enter the date as year, month and day: 1980-02-29.' }),
  };
}
