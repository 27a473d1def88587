export { lockStudy, openPoints } from './lock.service.ts';
export { declareRecordRoutes } from './records.routes.ts';
export { prepareSignature, signaturesOf, signVisit } from './signature.service.ts';
