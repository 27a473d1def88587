import type { MikroORM } from '@mikro-orm/postgresql';
import type { Pool } from 'pg';
import type { Settings } from '../config/settings.ts';
import type { ObjectStore } from '../services/object-store.ts';

/** What the application is built from; tests give the same things on throw-away servers. */
export interface Deps {
  orm: MikroORM;
  pool: Pool;
  settings: Settings;
  objectStore: ObjectStore;
}
