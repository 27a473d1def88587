import { StartError } from '#backend/config/start-error.ts';
import { atHead } from './lib/at-head.ts';
import { command } from './lib/with-database.ts';

// npm run db:migration -- name_in_words — writes the migration from the last one to the entities, to be read before it is kept.
const [name = ''] = process.argv.slice(2);

await command(async () => {
  // A hyphen would become part of the class's name and break it.
  if (!/^[a-z][a-z0-9_]*$/.test(name))
    throw new StartError('Name the migration in small letters, digits and _.');
  await atHead(async (orm) => {
    const { fileName, diff } = await orm.migrator.createMigration(undefined, false, false, name);
    if (!fileName) {
      console.log('entities and migrations agree: nothing to write');
      return;
    }
    console.log(diff.up.join('\n'));
    console.log(`\nwritten to backend/database/migrations/${fileName}; name it in migrations/list.ts`);
  });
});
