import type { EntityManager } from '@mikro-orm/postgresql';
import type { Protocol, RunSheetStep, VisitType } from '#schemas/protocol/protocol.ts';
import { withBlocksWrittenOut } from '#schemas/protocol/run-sheet.ts';
import { ProtocolVersionSchema } from '../protocol/protocol.entity.ts';
import type { Visit } from './visit.entity.ts';

/** The protocol version a visit follows. */
export const protocolOf = async (em: EntityManager, visit: Pick<Visit, 'protocolVersionId'>) =>
  em.findOneOrFail(ProtocolVersionSchema, visit.protocolVersionId);

/** The visit's type as that version has it. */
export async function visitTypeOf(em: EntityManager, visit: Visit): Promise<VisitType> {
  return visitTypeNamed((await protocolOf(em, visit)).content, visit.visitTypeKey);
}

/** A visit type of a protocol, its repeated blocks written out. */
export function visitTypeNamed(protocol: Protocol, key: string): VisitType {
  const type = protocol.visitTypes.find((candidate) => candidate.key === key);
  if (type === undefined) throw new Error(`The protocol has no visit type ${key}.`);
  return withBlocksWrittenOut(type);
}

export const stepOf = (type: VisitType, key: string): RunSheetStep | undefined =>
  type.runSheet.find((step) => step.key === key);
