import { nowDto } from '#schemas/api/overview.ts';
import type { Deps } from '#backend/http/deps.ts';
import type { RouteTable } from '#backend/http/route.ts';
import { figuresOf } from './figures.ts';
import { waitingFor } from './waiting.ts';

/** What needs the person in the role acted in, and the study in a few numbers. */
export function declareOverviewRoutes({ route }: RouteTable, { orm: { em } }: Deps): void {
  route({
    method: 'get',
    path: '/studies/:studyCode/now',
    summary: 'What needs me now',
    gate: 'person',
    responds: { status: 200, body: nowDto },
    acts: null,
    handler: async (_request, response) => {
      response.json({ items: await waitingFor(em), figures: await figuresOf(em) });
    },
  });
}
