export { assertConsented, recordConsent } from './consent.ts';
