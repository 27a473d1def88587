import type { EntityManager } from '@mikro-orm/postgresql';
import { instrumentLibrary } from './checking/instrument-library.ts';
import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import { instanceValidator, type InstanceValidator } from './checking/instance-validator.ts';
import { InstrumentVersionSchema, type InstrumentVersion } from './instrument.entity.ts';

/** A published version, read once: it never changes, so each process keeps what it has compiled. */
export interface PublishedInstrument {
  version: Pick<InstrumentVersion, 'id' | 'key' | 'version' | 'title' | 'hash'>;
  compiled: CompiledInstrument;
  validator: InstanceValidator;
}

const kept = new Map<string, PublishedInstrument>();
const most = 500;

/** The compiled instrument of a published version. */
export async function publishedInstrument(
  em: EntityManager,
  versionId: string,
): Promise<PublishedInstrument> {
  const known = kept.get(versionId);
  if (known !== undefined) return known;
  const row = await em.findOneOrFail(InstrumentVersionSchema, versionId);
  const compiled = compilePublished(row.schema, instrumentLibrary);
  const { id, key, version, title, hash } = row;
  const published = {
    version: { id, key, version, title, hash },
    compiled,
    validator: instanceValidator(compiled),
  };
  if (kept.size >= most) kept.delete([...kept.keys()][0]!);
  kept.set(versionId, published);
  return published;
}
