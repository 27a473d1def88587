import { sourceLimit, sourceTypes, type SourceType } from '#schemas/vocabulary/source-kinds.ts';

/** What the file dialog offers. Some systems know a `.csv` by another type, so its ending counts too. */
export const acceptedFiles = [...sourceTypes, '.csv'].join(',');

/** "PDF, PNG, JPEG or CSV, up to 25 MB" */
export const acceptedWords = `PDF, PNG, JPEG or CSV, up to ${sourceLimit / 1024 ** 2} MB`;

type Judged = { file: Blob } | { problem: string };

/** A file as it may be sent, or what is wrong with it and what to do. The server looks at its content again. */
export function judgeFile(file: File): Judged {
  const type = typeOf(file);
  if (type === null) return { problem: `This is no file of a kind that is taken: choose ${acceptedWords}.` };
  if (file.size === 0) return { problem: 'The file is empty; choose another.' };
  if (file.size > sourceLimit) return { problem: `The file is too large: choose ${acceptedWords}.` };
  // Without its name, which may tell who the participant is.
  return { file: new Blob([file], { type }) };
}

function typeOf({ type, name }: File): SourceType | null {
  const known = sourceTypes.find((one) => one === type);
  return known ?? (name.toLowerCase().endsWith('.csv') ? 'text/csv' : null);
}
