import { MikroORM } from '@mikro-orm/postgresql';
import config from '../../mikro-orm.config.ts';

/** Opens the database as the application's role, which cannot alter the trail. */
export const connect = (appUrl: string): Promise<MikroORM> =>
  MikroORM.init({ ...config, clientUrl: appUrl, pool: { min: 0, max: 10 } });
