import { expect, it } from 'vitest';
import { migrationsList } from '#backend/database/migrations/list.ts';
import { filesBelow } from './project-files.ts';

it('the list of migrations holds every file of the folder, in the order of their stamps', () => {
  const files = filesBelow(['backend/database/migrations'], /\/Migration\d{14}_[a-z_]+\.ts$/).map((file) =>
    file.replace(/^.*\/|\.ts$/g, ''),
  );
  expect(files.length).toBeGreaterThan(0);
  expect(migrationsList.map(({ name }) => name)).toEqual(files);
  expect(migrationsList.map((migration) => migration.class.name)).toEqual(files);
});
