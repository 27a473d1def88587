import { readFileSync } from 'node:fs';

const manifest = JSON.parse(readFileSync(new URL('../../package.json', import.meta.url), 'utf8')) as {
  version: string;
};

/** The release that is running; stands in every event, cut and export. */
export const productVersion = manifest.version;
