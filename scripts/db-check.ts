import { StartError } from '#backend/config/start-error.ts';
import { atHead } from './lib/at-head.ts';
import { command } from './lib/with-database.ts';

// npm run db:check — fails when the entities and the migrations disagree, and shows the statements between them.
await command(() =>
  atHead(async (orm) => {
    const difference = (await orm.schema.getUpdateSchemaSQL({ wrap: false })).trim();
    if (difference) {
      throw new StartError(
        `Entities and migrations disagree; npm run db:migration makes the next one.\n${difference}`,
      );
    }
    console.log('entities and migrations agree');
  }),
);
