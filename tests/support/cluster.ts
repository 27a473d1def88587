import type { TestProject } from 'vitest/node';
import { prepareDatabase } from '#backend/prepare-database.ts';
import { startThrowAwayCluster, type ThrowAwayCluster } from '#backend/services/postgres/throw-away.ts';
import { ensureDatabase, withClient } from '#backend/services/postgres/roles.ts';

const template = 'vesselry_template';
/** Stands for the database's name in the addresses that tests are given. */
export const databaseMark = '__database__';

declare module 'vitest' {
  interface ProvidedContext {
    /** Addresses as owner and as application role, `databaseMark` in place of the name, and the template to copy. */
    server: { ownerUrl: string; appUrl: string; template: string };
  }
}

/** Several projects of one run share the cluster; the last to end removes it. */
const shared = globalThis as { vesselryTestCluster?: { users: number; started: Promise<ThrowAwayCluster> } };

/** Starts a throw-away cluster with one migrated database, which each test file copies. */
export default async function setup(project: TestProject): Promise<() => Promise<void>> {
  const use = (shared.vesselryTestCluster ??= { users: 0, started: startWithTemplate() });
  use.users += 1;
  const cluster = await use.started;
  project.provide('server', {
    ownerUrl: cluster.ownerUrl(databaseMark),
    appUrl: cluster.appUrl(databaseMark),
    template,
  });
  return async () => {
    use.users -= 1;
    if (use.users > 0) return;
    delete shared.vesselryTestCluster;
    await cluster.remove();
  };
}

async function startWithTemplate(): Promise<ThrowAwayCluster> {
  const cluster = await startThrowAwayCluster((text) => process.stdout.write(`${text}\n`));
  try {
    await withClient(cluster.ownerUrl('postgres'), (client) => ensureDatabase(client, template));
    await prepareDatabase(cluster.ownerUrl(template));
    return cluster;
  } catch (error) {
    await cluster.remove();
    throw error;
  }
}
