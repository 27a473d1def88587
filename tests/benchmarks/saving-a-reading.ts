import { expectStatus, save } from '../support/capture-builders.ts';
import { aStudyWithEntries, type StudyWithEntries } from './a-study-with-entries.ts';
import { startBareRoutes } from './bare-routes.ts';
import { startBenchServer } from './bench-server.ts';
import { ms, printTable, ratio, spread, timed } from './measure.ts';

/**
 * Saving one reading, as the page does it, against the same statements written by hand over `pg` and against a route
 * that sends one INSERT: with one client and with eight, each on an entry of its own, all in one study.
 *
 * `node --import tsx tests/benchmarks/saving-a-reading.ts`
 */
const saves = 400;
const warmUp = 40;

const server = await startBenchServer();
try {
  const study = await aStudyWithEntries(server, 16);
  // Entries of their own: a bare save passes the product's by, and the product would say so.
  const others = { ...study, entries: study.entries.splice(8) };
  const bare = await startBareRoutes(server.ownerUrl, others);
  try {
    const rows: string[][] = [];
    for (const clients of [1, 8]) {
      const own = spread(await together(clients, ownSaver(study)));
      const byHand = spread(await together(clients, bareSaver(`${bare.origin}/by-hand`, others)));
      const insert = spread(await together(clients, bareSaver(`${bare.origin}/insert`, others)));
      for (const [name, { median, p99 }] of Object.entries({ product: own, 'by hand': byHand, insert })) {
        rows.push([
          `${clients}`,
          name,
          ms(median),
          ms(p99),
          ratio(own.median / median),
          ratio(own.p99 / p99),
        ]);
      }
    }
    console.log('Saving one reading');
    printTable(['clients', 'route', 'median', 'p99', 'product / it, median', 'p99'], rows);
  } finally {
    await bare.stop();
  }
} finally {
  await server.stop();
}

/** Times of all clients together, each sending one save after the other. */
async function together(clients: number, saver: (client: number) => () => Promise<void>): Promise<number[]> {
  const each = Math.ceil(saves / clients);
  const times = await Promise.all(
    Array.from({ length: clients }, async (_, client) => {
      const saveOne = saver(client);
      const taken: number[] = [];
      for (let turn = -warmUp / clients; turn < each; turn += 1) {
        const time = await timed(saveOne);
        if (turn >= 0) taken.push(time);
      }
      return taken;
    }),
  );
  return times.flat();
}

function ownSaver({ coordinator, path, entries }: StudyWithEntries): (client: number) => () => Promise<void> {
  return (client) => {
    let value = 100;
    return async () => {
      value = value === 139 ? 100 : value + 1;
      const answer = await save(coordinator.client, path, entries[client]!, { '/systolic/0': value });
      expectStatus(answer, 200);
      entries[client] = answer.body;
    };
  };
}

function bareSaver(address: string, { entries }: StudyWithEntries): (client: number) => () => Promise<void> {
  return (client) => {
    let value = 100;
    return async () => {
      value = value === 139 ? 100 : value + 1;
      const answer = await fetch(`${address}/${entries[client]!.id}`, {
        method: 'PATCH',
        headers: { 'Content-Type': 'application/json' },
        body: JSON.stringify({ value }),
      });
      if (!answer.ok) throw new Error(`Answered ${answer.status}: ${await answer.text()}`);
      await answer.json();
    };
  };
}
