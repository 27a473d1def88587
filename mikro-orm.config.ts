import { Migrator } from '@mikro-orm/migrations';
import { defineConfig } from '@mikro-orm/postgresql';
import { entities } from './backend/entities.ts';
import { migrationsList } from './backend/database/migrations/list.ts';
import { TrailSubscriber } from './backend/database/trail/trail-subscriber.ts';

/** Tables without an entity: left alone by the generator, or it would drop them. */
const withoutEntity = [
  /^audit_event(_p\d+)?$/,
  /^recorded_value(_p\d+)?$/,
  /^entry_revision(_p\d+)?$/,
  /^entry_p\d+$/,
  'session',
  'rate_limit',
  'idempotency_key',
  'job_beat',
  'job_progress',
  'mail_outbox',
];

export default defineConfig({
  // Commands and the application give their own address; as owner to migrate, as vesselry_app to work.
  clientUrl: process.env['DATABASE_OWNER_URL'] ?? 'postgresql://vesselry@127.0.0.1/vesselry',
  entities,
  extensions: [Migrator],
  subscribers: [new TrailSubscriber()],
  metadataCache: { enabled: false },
  forceUtcTimezone: true,
  migrations: {
    migrationsList,
    path: './backend/database/migrations',
    glob: '!(list|*.d|*.test).ts',
    emit: 'ts',
    snapshot: false,
    disableForeignKeys: false,
  },
  schemaGenerator: { skipTables: withoutEntity, disableForeignKeys: false },
});
