import { prepareDatabase } from '#backend/prepare-database.ts';
import { withDatabase } from './lib/with-database.ts';

// npm run db:migrate — brings the database to this release, as its owner.
await withDatabase(async ({ ownerUrl }) => {
  const applied = await prepareDatabase(ownerUrl);
  console.log(applied.length > 0 ? `applied ${applied.join(', ')}` : 'nothing to apply');
});
