import type { EntityManager } from '@mikro-orm/postgresql';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { makeValidatorCode } from './checking/checking.pool.ts';
import { InstrumentPreviewSchema, InstrumentVersionSchema } from './instrument.entity.ts';

/** Makes the validator of a checked draft fetchable by its hash; another process may be asked for it. */
export async function keepPreview(
  em: EntityManager,
  studyId: string,
  { schema, hash }: { schema: InstrumentSchema; hash: string },
): Promise<void> {
  if ((await validatorByHash(em, studyId, hash, { drafts: true })) !== null) return;
  await em.execute(
    `delete from instrument_preview where study_id = ? and made_at < now() - interval '1 day'`,
    [studyId],
  );
  await em.execute(
    `insert into instrument_preview (study_id, hash, validator_code, made_at) values (?, ?, ?, now())
     on conflict do nothing`,
    [studyId, hash, await makeValidatorCode(schema)],
  );
}

/** The validator of a published version, or of a draft for those who may see drafts; null when there is none. */
export async function validatorByHash(
  em: EntityManager,
  studyId: string,
  hash: string,
  { drafts }: { drafts: boolean },
): Promise<string | null> {
  const version = await em.findOne(
    InstrumentVersionSchema,
    { studyId, hash },
    { orderBy: { version: 'desc' }, populate: ['validatorCode'] },
  );
  if (version !== null) return version.validatorCode;
  const preview = drafts ? await em.findOne(InstrumentPreviewSchema, { studyId, hash }) : null;
  return preview?.validatorCode ?? null;
}
