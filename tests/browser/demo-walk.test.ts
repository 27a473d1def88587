import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { SessionDto } from '#schemas/api/accounts.ts';
import { problemsOf } from '#backend/http/validate.ts';
import { demoAccounts } from '#backend/modules/accounts/index.ts';
import { seedDemo } from '#backend/modules/demo/index.ts';
import { buildClient } from '#tests/support/browser-client.ts';
import { chooseStudy, settled, signInByKeyboard, watchedPage } from '#tests/support/browser-page.ts';
import { deeperFrom, judge, tabsOf, takePicture } from '#tests/support/browser-walk.ts';
import { launchChromium } from '#tests/support/chromium.ts';
import { Client } from '#tests/support/client.ts';
import { realIds } from '#tests/support/real-ids.ts';
import { call, nameOf, seen } from '#tests/support/route-calls.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';

let server: TestServer;
let browser: Browser;

beforeAll(async () => {
  buildClient();
  server = await startTestServer({ worker: true, settings: { demo: true } });
  browser = await launchChromium();
  await seedDemo(server);
}, 600_000);
afterAll(async () => {
  await browser.close();
  await server.stop();
});

const account = (name: string) => {
  const found = demoAccounts.find(({ email }) => email.startsWith(`${name}@`));
  if (found === undefined) throw new Error(`No demo account ${name}.`);
  return found;
};

/** Opens the product as this person, in this study. */
async function enter(name: string, study: string) {
  const watched = await watchedPage(browser, server.url);
  await signInByKeyboard(watched.page, account(name));
  await chooseStudy(watched.page, study);
  return watched;
}

/** The study's visit that is under way in the demo. */
const underWay = async (): Promise<string> => {
  const [row] = await server.ownerSql<{ id: string }>(
    `select id from visit where state = 'under-way' limit 1`,
  );
  if (row === undefined) throw new Error('No visit of the demo is under way.');
  return row.id;
};

// proves AX-01, AX-02, WS-06
describe('every page of every role is reachable by keyboard, sound and complete', () => {
  it('the sign-in page', async () => {
    const watched = await watchedPage(browser, server.url);
    await watched.page.goto('/sign-in');
    expect(await judge(watched, 'sign-in')).toEqual([]);
    await watched.page.context().close();
  });

  it.each([
    ['administrator', 'ada.quill', 'Administration', 2],
    ['investigator', 'petra.inkwell', 'screepath', 12],
    ['coordinator', 'ivo.varro', 'reedgrip', 9],
    ['site-coordinator', 'cora.tallow', 'screepath', 9],
    ['technician', 'tove.okoro-lind', 'reedgrip', 8],
    ['physician', 'dario.fenwick', 'reedgrip', 8],
    ['statistician', 'bela.ferreol', 'screepath', 8],
    ['monitor', 'mina.ostler', 'reedgrip', 12],
  ])(
    'the %s, %s in %s',
    async (role, name, study, atLeast) => {
      const watched = await enter(name, study);
      const { page } = watched;
      const tabs = await tabsOf(page, study);
      expect(tabs.length).toBeGreaterThanOrEqual(atLeast);
      const wrong: string[] = [];
      for (const tab of tabs) {
        const noun = tab.split('/').at(-1)!;
        // The visits of a demo lie in the past.
        await page.goto(noun === 'visits' ? `${tab}?days=all` : tab);
        wrong.push(...(await judge(watched, `${role}-${noun}`)));
        const deeper = await deeperFrom(page, tab);
        if (deeper === undefined) continue;
        await page.goto(deeper);
        wrong.push(...(await judge(watched, `${role}-${noun}-one`)));
      }
      await page.context().close();
      expect(wrong).toEqual([]);
    },
    480_000,
  );
});

describe('journeys', () => {
  // proves WS-13, DE-03
  it('the coordinator types readings, loses the network, types on, and all of it is stored once', async () => {
    const watched = await enter('ivo.varro', 'reedgrip');
    const { page } = watched;
    const visit = await underWay();
    await page.goto(`/studies/reedgrip/visits/${visit}?step=exercise-after`);
    await settled(page);
    const wrong = await judge(watched, 'run-sheet');
    const systolic = page.getByLabel('Systolic pressure').first();
    const line = page.getByRole('status').filter({ hasText: /revision|Kept on this device|Saving/ });
    const stored = async (pointer: string) =>
      server.ownerSql<{ written: string }>(
        `select v.written from recorded_value v join entry e on e.id = v.subject_id and e.study_id = v.study_id
         where e.visit_id = $1 and e.step_key = 'exercise-after' and v.address = $2`,
        [visit, pointer],
      );
    const before = (await stored('/systolic')).map(({ written }) => written);
    await systolic.fill('131');
    await systolic.press('Tab');
    await line.getByText(/^Saved .*revision \d+/).waitFor();
    await page.context().setOffline(true);
    await systolic.fill('132');
    await systolic.press('Tab');
    const diastolic = page.getByLabel('Diastolic pressure').first();
    await diastolic.fill('84');
    await diastolic.press('Tab');
    await line.getByText(/Kept on this device, 2 changes/).waitFor();
    await takePicture(page, 'offline');
    await page.context().setOffline(false);
    await line.getByText(/^Saved .*revision \d+/).waitFor();
    const after = (await stored('/systolic')).map(({ written }) => written);
    expect(after.toSorted()).toEqual([...before, '131', '132'].toSorted());
    expect((await stored('/diastolic')).filter(({ written }) => written === '84')).toHaveLength(1);
    await page.reload();
    await settled(page);
    expect(await page.getByLabel('Systolic pressure').first().inputValue()).toBe('132');
    expect(await page.getByLabel('Diastolic pressure').first().inputValue()).toBe('84');
    expect([...wrong, ...watched.complaints()]).toEqual([]);
    await page.context().close();
  });

  // proves RB-04, RB-05
  it('what the unblinded technician enters is shown to the coordinator as hidden, and to the technician as it is', async () => {
    const visit = await underWay();
    const open = async (name: string) => {
      const watched = await enter(name, 'reedgrip');
      const answers: string[] = [];
      watched.page.on('response', (response) => {
        if (response.url().includes('/entries/')) void response.text().then((text) => answers.push(text));
      });
      await watched.page.goto(`/studies/reedgrip/visits/${visit}?step=juice`);
      await settled(watched.page);
      const text = await watched.page.getByRole('main').innerText();
      await watched.page.context().close();
      return { text, answers: answers.join('\n') };
    };
    const blinded = await open('ivo.varro');
    const unblinded = await open('tove.okoro-lind');
    expect(blinded.text).toContain('hidden until unblinding');
    expect(blinded.answers).toContain('"hidden":true');
    expect(unblinded.text).not.toContain('hidden until unblinding');
    expect(unblinded.answers).not.toContain('"hidden":true');
    expect(unblinded.answers).toContain('bottle 6');
    expect(blinded.answers).not.toContain('bottle');
  });
});

describe('the API over the demo, with ids of real rows', () => {
  const cast = [
    'petra.inkwell',
    'ivo.varro',
    'tove.okoro-lind',
    'dario.fenwick',
    'bela.ferreol',
    'mina.ostler',
  ];
  const reads = () =>
    server.routes.filter(({ method, path }) => method === 'get' && path.startsWith('/studies/:studyCode'));
  const studyIds = async () =>
    new Map(
      (await server.ownerSql<{ code: string; id: string }>('select code, id from study')).map(
        ({ code, id }) => [code, id],
      ),
    );
  const actingIn = async (name: string, study: string): Promise<Client> => {
    const client = new Client(server);
    const { email, password } = account(name);
    const session = await client.post<SessionDto>('/session', { email, password });
    const membership = session.body.memberships.find(({ studyCode }) => studyCode === study);
    await client.put('/session/acting', { membershipId: membership!.id });
    return client;
  };

  // proves XC-14
  it('each read succeeds for somebody, and answers as the description says', async () => {
    const ids = await studyIds();
    const wrong: string[] = [];
    const succeeded = new Set<string>();
    for (const [studyCode, studyId] of ids) {
      for (const name of cast) {
        const client = await actingIn(name, studyCode);
        for (const declared of reads()) {
          const parameters = await realIds(server, declared, studyId);
          if (parameters === undefined) continue;
          const answer = await call(client, declared, { parameters: { ...parameters, studyCode } });
          const { status, body: schema } = declared.responds;
          if (answer.status >= 500) wrong.push(`${name} ${nameOf(declared)}: ${answer.status}`);
          if (answer.status !== status) continue;
          succeeded.add(nameOf(declared));
          if (schema === null || typeof answer.body === 'string') continue;
          const found = problemsOf(schema, answer.body).slice(0, 2);
          if (found.length > 0)
            wrong.push(`${studyCode} ${name} ${nameOf(declared)}: ${JSON.stringify(found)}`);
        }
      }
    }
    expect(wrong).toEqual([]);
    expect(succeeded.size).toBeGreaterThan(30);
  });

  // proves AC-02
  it('a row of another study is as absent as none, to every role and on every route', async () => {
    const ids = await studyIds();
    const wrong: string[] = [];
    let compared = 0;
    for (const [studyCode, other] of [
      ['reedgrip', ids.get('screepath')!],
      ['screepath', ids.get('reedgrip')!],
    ] as const) {
      for (const name of cast) {
        const client = await actingIn(name, studyCode);
        for (const declared of server.routes.filter(({ path }) => path.startsWith('/studies/:studyCode'))) {
          const foreign = await realIds(server, declared, other);
          // Names of instruments are words of a library, which studies may share.
          if (foreign === undefined || declared.path.includes(':instrumentKey')) continue;
          if (Object.keys(foreign).length === 0) continue;
          const theirs = await call(client, declared, { parameters: { ...foreign, studyCode } });
          const none = await call(client, declared, { parameters: { studyCode } });
          compared += 1;
          // A code that is none is refused for its form.
          const same =
            declared.path.endsWith('/:code') || JSON.stringify(seen(theirs)) === JSON.stringify(seen(none));
          if (!same || theirs.status < 400)
            wrong.push(`${name} in ${studyCode}, ${nameOf(declared)}: ${theirs.status}, ${none.status}`);
        }
      }
    }
    expect(wrong).toEqual([]);
    expect(compared).toBeGreaterThan(300);
  });
});
