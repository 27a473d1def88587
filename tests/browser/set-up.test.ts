import type { Browser, Locator, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { reedgrip } from '#schemas/protocol/demo/reedgrip.ts';
import { buildClient } from '#tests/support/browser-client.ts';
import {
  settled,
  signInByKeyboard,
  tabTo,
  watchedPage,
  type WatchedPage,
} from '#tests/support/browser-page.ts';
import { judge } from '#tests/support/browser-walk.ts';
import { launchChromium } from '#tests/support/chromium.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, aPerson, aStudy, password, type Member } from '#tests/support/setup-builders.ts';

let server: TestServer;
let browser: Browser;
let administrator: Member;
let investigator: Member;
let studyId: string;

beforeAll(async () => {
  buildClient();
  server = await startTestServer({ worker: true });
  browser = await launchChromium();
  const { study } = await aStudy(server, { code: 'reed', siteCodes: ['AA'] });
  studyId = study.id;
  administrator = await aMember(server, 'administrator', null);
  investigator = await aMember(server, 'principal-investigator', study);
  await aMember(server, 'monitor', study, { unblinded: true });
}, 600_000);
afterAll(async () => {
  await browser.close();
  await server.stop();
});

async function enter({ email }: Member): Promise<WatchedPage> {
  const watched = await watchedPage(browser, server.url);
  await signInByKeyboard(watched.page, { email, password });
  return watched;
}

async function open(page: Page, path: string): Promise<void> {
  await page.goto(path);
  await settled(page);
}

/** What can be reached: the open dialog, or the page. */
async function reachable(page: Page): Promise<Page | Locator> {
  const dialog = page.locator('dialog[open]');
  return (await dialog.count()) > 0 ? dialog : page;
}

/** Presses what has this name, found and pressed with the keyboard alone. */
async function press(page: Page, role: 'button' | 'link' | 'tab', name: string | RegExp): Promise<void> {
  const place = await reachable(page);
  await tabTo(page, place.getByRole(role, { name, exact: typeof name === 'string' }).first());
  await page.keyboard.press('Enter');
}

async function type(page: Page, label: RegExp, text: string): Promise<void> {
  const place = await reachable(page);
  const box = place.getByRole('textbox', { name: label }).or(place.getByRole('combobox', { name: label }));
  await tabTo(page, box.first());
  await page.keyboard.press('ControlOrMeta+a');
  await page.keyboard.type(text);
}

async function pick(page: Page, label: RegExp, choice: string): Promise<void> {
  const place = await reachable(page);
  await tabTo(page, place.getByRole('combobox', { name: label }));
  await page.keyboard.type(choice);
}

/** Checks one radio of its group: Tab reaches the group, the arrows go through it. */
async function choose(page: Page, name: string | RegExp): Promise<void> {
  const place = await reachable(page);
  const target = place.getByRole('radio', { name, exact: typeof name === 'string' });
  const group = place.locator(`input[type=radio][name="${await target.getAttribute('name')}"]`);
  const checked = group.and(page.locator(':checked'));
  await tabTo(page, (await checked.count()) > 0 ? checked : group.first());
  await page.keyboard.press('Space');
  for (let tries = 0; tries < 12 && !(await target.isChecked()); tries += 1)
    await page.keyboard.press('ArrowDown');
  expect(await target.isChecked()).toBe(true);
}

/** The link of the newest mail to this address. */
async function linkIn(address: string): Promise<string> {
  for (let tries = 0; tries < 100; tries += 1) {
    const mail = (await server.mails()).findLast(({ to }) => to.includes(address));
    const link = /https?:\/\/\S+/.exec(mail?.text ?? '')?.[0];
    if (link !== undefined) return link;
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
  throw new Error(`No mail reached ${address}.`);
}

// proves AX-01, AX-02, EM-03
describe('the administrator, with the keyboard alone', () => {
  it('invites a person, who opens the account from the mail and is given a role', async () => {
    const watched = await enter(administrator);
    const { page } = watched;
    await open(page, '/administration/people');
    expect(await judge(watched)).toEqual([]);
    await press(page, 'button', 'Invite a person');
    await type(page, /^Name/, 'Reed Warbler');
    await type(page, /^E-mail/, 'reed.warbler@example.test');
    await press(page, 'button', 'Send the invitation');
    await page.getByRole('heading', { level: 1, name: 'Reed Warbler' }).waitFor();

    const link = await linkIn('reed.warbler@example.test');
    expect(new URL(link).pathname).toBe('/invitation');
    const invited = await watchedPage(browser, server.url);
    await invited.page.goto(link);
    await invited.page.getByText('reed.warbler@example.test').waitFor();
    expect(await judge(invited)).toEqual([]);
    await type(invited.page, /^Choose a password/, 'a heron stands in the reeds');
    await tabTo(invited.page, invited.page.getByRole('checkbox'));
    await invited.page.keyboard.press('Space');
    await press(invited.page, 'button', 'Open my account');
    await invited.page.getByRole('heading', { name: 'Your account is open' }).waitFor();
    await invited.page.context().close();

    await page.reload();
    await settled(page);
    await press(page, 'button', 'Grant a membership');
    await pick(page, /^Role/, 'monitor');
    await pick(page, /^Study/, 'REED');
    await choose(page, /^blinded/);
    await choose(page, 'joins the team');
    await press(page, 'button', 'Grant the membership');
    await page.getByRole('cell', { name: 'monitor', exact: true }).waitFor();
    expect(await judge(watched)).toEqual([]);
    await page.context().close();
  });

  it('makes a study with a site, and is told what a wrong time zone is', async () => {
    const watched = await enter(administrator);
    const { page } = watched;
    await open(page, '/administration/studies');
    expect(await judge(watched)).toEqual([]);
    await press(page, 'button', 'Make a study');
    await type(page, /^Name/, 'Sedge 2');
    await type(page, /^Title/, 'An invented study of sedges');
    expect(await page.getByRole('textbox', { name: /^Code/ }).inputValue()).toBe('sedge-2');
    await press(page, 'button', 'Make the study');
    await page.getByRole('heading', { level: 1, name: 'Sedge 2' }).waitFor();
    await settled(page);
    await press(page, 'button', 'Add a site');
    await type(page, /^Code/, 'tn');
    await type(page, /^Name/, 'Tarn Nook');
    await type(page, /^Time zone/, 'Mars/Crater');
    await press(page, 'button', 'Add the site');
    await page.getByText('is not an IANA time zone').first().waitFor();
    await type(page, /^Time zone/, 'America/La_Paz');
    await press(page, 'button', 'Add the site');
    await page.getByRole('cell', { name: 'America/La_Paz' }).waitFor();
    expect(watched.complaints().filter((text) => !text.includes('422'))).toEqual([]);
    expect(await judge(watched)).toEqual([]);
    await page.context().close();
  });

  it('sees pages for a forgotten and a new password that anybody can use', async () => {
    const { email } = await aPerson(server);
    const watched = await watchedPage(browser, server.url);
    await watched.page.goto('/forgotten-password');
    expect(await judge(watched)).toEqual([]);
    await type(watched.page, /^E-mail/, email);
    await press(watched.page, 'button', 'Send the link');
    await watched.page.getByText('If an account has this address').waitFor();
    await watched.page.goto(await linkIn(email));
    expect(await judge(watched)).toEqual([]);
    await type(watched.page, /^Choose a password/, 'new sedge by the old water');
    await press(watched.page, 'button', 'Set the new password');
    await watched.page.getByRole('heading', { name: 'The new password holds' }).waitFor();
    await watched.page.context().close();
  });
});

// proves AX-02, IV-03
describe('the investigator, with the keyboard alone', () => {
  it('drafts an instrument, sees a mistake at its place, mends it, tries it and publishes it', async () => {
    const watched = await enter(investigator);
    const { page } = watched;
    await open(page, '/studies/reed/study');
    expect(await judge(watched)).toEqual([]);
    await open(page, '/studies/reed/instruments');
    await press(page, 'button', 'New instrument');
    await choose(page, /^blank/);
    await type(page, /^Title/, 'Reed length');
    await press(page, 'button', 'Lay it on the drafting table');
    await page.getByText('Try it first: keep at least one sample.').waitFor();
    expect(await judge(watched)).toEqual([]);

    await press(page, 'button', 'Add a field');
    await type(page, /^Label/, 'Length of the reed');
    await type(page, /^Unit/, 'centimetre');
    await press(page, 'button', 'Add the field');
    await page.getByText('The schema has problems; see below.').waitFor();
    await page.getByRole('tab', { name: 'Problems (1)' }).waitFor();
    // To the place of the problem by its link, and the mistake is typed over.
    await press(page, 'button', /^Line \d+$/);
    await page.keyboard.press('Control+f');
    await page.keyboard.press('Escape');
    const editor = page.getByRole('textbox', { name: /^Schema of the instrument/ });
    const text = await editor.evaluate((element) => (element as HTMLElement).innerText);
    expect(text).toContain('lengthOfTheReed');
    await page.keyboard.press('Home');
    await page.keyboard.press('Shift+End');
    await page.keyboard.type('"unit": "cm"');
    await page.getByText('Try it first: keep at least one sample.').waitFor();
    await page.getByRole('textbox', { name: /^Length of the reed/ }).waitFor();

    await type(page, /^Length of the reed/, '118.50');
    await press(page, 'tab', /^Problems/);
    await page.keyboard.press('ArrowRight');
    await press(page, 'button', 'Keep the values in the form as a sample');
    await page.getByText('passes, as said').waitFor();
    await page.getByText('Nothing stands against publishing it.').waitFor();
    expect(await judge(watched)).toEqual([]);
    await press(page, 'button', 'Publish');
    await choose(page, 'first version');
    await press(page, 'button', 'Publish version 1');
    await page.getByRole('tab', { name: 'Versions (1)' }).waitFor();
    await settled(page);
    const [stored] = await server.ownerSql<{ samples: unknown; schema: { properties: object } }>(
      "select samples, schema from instrument_version where key = 'reed-length'",
    );
    expect(stored?.samples).toMatchObject([{ values: { '/lengthOfTheReed': 118.5 } }]);
    for (const view of ['versions', 'fields', 'form']) {
      await open(page, `/studies/reed/instruments/reed-length?view=${view}`);
      expect(await judge(watched)).toEqual([]);
    }
    await page.context().close();
  });

  it('keeps what is typed when somebody else saved meanwhile, and lets a person choose', async () => {
    const watched = await enter(investigator);
    const { page } = watched;
    await investigator.client.post('/studies/reed/instrument-drafts', {
      from: 'library',
      key: 'cold-pressor',
    });
    await open(page, '/studies/reed/instruments/cold-pressor/draft');
    await page.getByText('Nothing stands against publishing it.').waitFor();
    const [{ id, revision }] = (await server.ownerSql<{ id: string; revision: number }>(
      "select id, revision from instrument_draft where key = 'cold-pressor'",
    )) as [{ id: string; revision: number }];
    const theirs = { text: '{ "title": "Theirs" }', samples: [] };
    await investigator.client.put(`/studies/reed/instrument-drafts/${id}`, theirs, { ifMatch: revision });
    await tabTo(page, page.getByRole('textbox', { name: /^Schema of the instrument/ }));
    await page.keyboard.press('Control+Home');
    await page.keyboard.type(' ');
    await press(page, 'button', 'Save now');
    await page.getByText('Somebody else changed this draft meanwhile').waitFor();
    // The browser itself notes each refusal.
    expect(watched.complaints().filter((text) => !text.includes('412'))).toEqual([]);
    expect(await judge(watched)).toEqual([]);
    await press(page, 'button', 'Keep mine over theirs');
    await press(page, 'button', 'Save now');
    await page.getByText(/saved .* revision 3/).waitFor();
    await page.context().close();
  });

  it('reads, amends and publishes the protocol', async () => {
    const used = new Set([
      ...reedgrip.visitTypes.flatMap(({ runSheet }) =>
        runSheet.flatMap(({ instrument }) => instrument ?? []),
      ),
      ...reedgrip.participantLogs.map(({ instrument }) => instrument),
    ]);
    const { client } = investigator;
    for (const key of used) {
      const drafts = '/studies/reed/instrument-drafts';
      const { body } = await client.post<{ id: string }>(drafts, { from: 'library', key });
      const reason = { reason: 'as in the library' };
      const published = await client.post(`${drafts}/${body.id}/publication`, reason, { ifMatch: 1 });
      expect(published.status, key).toBe(201);
    }
    const watched = await enter(investigator);
    const { page } = watched;
    await open(page, '/studies/reed/protocol');
    expect(await judge(watched)).toEqual([]);
    await press(page, 'button', 'Write the protocol');
    await page.getByText('The text has problems; see below.').waitFor();
    expect(await judge(watched)).toEqual([]);
    const content = { ...reedgrip, sites: ['site-aa'] };
    await client.put(
      '/studies/reed/protocol-draft',
      { text: JSON.stringify(content, null, 2) },
      { ifMatch: 1 },
    );
    await page.reload();
    await page.getByText('Nothing stands against publishing it.').waitFor();
    expect(await judge(watched)).toEqual([]);
    await press(page, 'button', 'Publish');
    await choose(page, 'first version');
    await press(page, 'button', 'Publish version 1');
    await page.getByRole('heading', { level: 1, name: reedgrip.title }).waitFor();
    for (const view of ['overview', 'run-sheets', 'measures', 'versions']) {
      await open(page, `/studies/reed/protocol?view=${view}`);
      expect(await judge(watched)).toEqual([]);
    }
    await open(page, '/studies/reed/study');
    await press(page, 'button', 'Open the study for enrolment');
    await type(page, /^Reason/, 'everything is approved');
    await press(page, 'button', 'Open for enrolment');
    await page.getByText('open for enrolment', { exact: true }).waitFor();
    const [study] = await server.ownerSql<{ state: string }>('select state from study where id = $1', [
      studyId,
    ]);
    expect(study?.state).toBe('running');
    await page.context().close();
  });
});
