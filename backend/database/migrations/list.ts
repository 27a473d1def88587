import { Migration20261201143000_tables } from './Migration20261201143000_tables.ts';
import { Migration20261201143100_trail } from './Migration20261201143100_trail.ts';
import { Migration20261201143200_jobs } from './Migration20261201143200_jobs.ts';
import { Migration20261201144500_participation } from './Migration20261201144500_participation.ts';
import { Migration20261201150000_set_up } from './Migration20261201150000_set_up.ts';

/** Every migration by name, in order: no folder is searched at run time, so all callers apply the same ones. */
export const migrationsList = [
  { name: 'Migration20261201143000_tables', class: Migration20261201143000_tables },
  { name: 'Migration20261201143100_trail', class: Migration20261201143100_trail },
  { name: 'Migration20261201143200_jobs', class: Migration20261201143200_jobs },
  { name: 'Migration20261201144500_participation', class: Migration20261201144500_participation },
  { name: 'Migration20261201150000_set_up', class: Migration20261201150000_set_up },
];
