export { instrumentLibrary } from './checking/instrument-library.ts';
export { evaluateEntry } from './checking/evaluate-entry.ts';
export { publishedInstrument, type PublishedInstrument } from './published-instrument.ts';
