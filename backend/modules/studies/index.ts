export { assertStudyOpen } from './study-open.ts';
