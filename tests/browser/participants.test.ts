import axe from 'axe-core';
import { mkdir } from 'node:fs/promises';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ParticipantDto } from '#schemas/api/participants.ts';
import { launchChromium } from '#tests/support/chromium.ts';
import {
  allocate,
  aRunningStudy,
  consent,
  eligible,
  setStudyState,
  type RunningStudy,
} from '#tests/support/participants-builders.ts';
import { startTestServer, type TestServer } from '#tests/support/server.ts';
import { aMember, password, type Member } from '#tests/support/setup-builders.ts';

let server: TestServer;
let browser: Browser;
let running: RunningStudy;
const canary = 'Quillon Featherstitch';

beforeAll(async () => {
  server = await startTestServer();
  browser = await launchChromium();
  running = await aRunningStudy(server, { sealed: false });
});
afterAll(async () => {
  await browser.close();
  await server.stop();
});

/** A page of this person, signed in through the form. */
async function pageOf(member: Member, path: string, width = 1440): Promise<Page> {
  const context = await browser.newContext({ viewport: { width, height: 900 }, reducedMotion: 'reduce' });
  const page = await context.newPage();
  await page.goto(server.url + path);
  await page.getByLabel('E-mail').fill(member.email);
  await page.getByLabel('Password').fill(password);
  await page.keyboard.press('Enter');
  await page.getByRole('navigation', { name: 'Breadcrumbs' }).or(page.getByRole('main')).first().waitFor();
  return page;
}

/** No finding of axe on the page as it stands; a picture of it where VESSELRY_SCREENSHOTS names a folder. */
async function looksRight(page: Page, name: string): Promise<void> {
  await page.waitForLoadState('networkidle');
  await page.evaluate(axe.source);
  const found = await page.evaluate(async () => {
    const { axe: inPage } = window as unknown as { axe: typeof axe };
    const { violations } = await inPage.run({ resultTypes: ['violations'] });
    return violations.map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html).join(' | ')}`);
  });
  const folder = process.env['VESSELRY_SCREENSHOTS'];
  if (folder !== undefined) {
    await mkdir(folder, { recursive: true });
    await page.screenshot({
      path: join(folder, `${name}-${page.viewportSize()!.width}.png`),
      fullPage: true,
    });
  }
  expect(found, name).toEqual([]);
}

/** Everything the browser keeps of this origin: storages, databases, caches, history address. */
const kept = (page: Page): Promise<string> =>
  page.evaluate(async () => {
    const parts = [
      JSON.stringify({ ...localStorage }),
      JSON.stringify({ ...sessionStorage }),
      location.href,
      document.cookie,
    ];
    for (const { name } of await indexedDB.databases()) {
      const database = await new Promise<IDBDatabase>((resolve, reject) => {
        const request = indexedDB.open(name!);
        request.onsuccess = () => resolve(request.result);
        request.onerror = () => reject(request.error!);
      });
      for (const store of database.objectStoreNames) {
        const rows = await new Promise<unknown[]>((resolve, reject) => {
          const request = database.transaction(store).objectStore(store).getAll();
          request.onsuccess = () => resolve(request.result as unknown[]);
          request.onerror = () => reject(request.error!);
        });
        parts.push(JSON.stringify(rows));
      }
      database.close();
    }
    for (const name of await caches.keys()) {
      for (const request of await (await caches.open(name)).keys()) parts.push(request.url);
    }
    return parts.join('\n');
  });

const state = async (code: string): Promise<ParticipantDto> =>
  (await running.coordinator.client.get<ParticipantDto>(`${running.path}/participants/by-code/${code}`)).body;

describe.each([1440, 768])('at %i pixels', (width) => {
  it('the technician seals the list, the coordinator enrols and assigns, by keyboard, and nobody next door learns more', async () => {
    if (width === 1440) {
      const technician = await pageOf(running.technician, `${running.path}/allocation`, width);
      const opener = technician.getByRole('button', { name: 'Make and seal the list' });
      await opener.focus();
      await technician.keyboard.press('Enter');
      const dialog = technician.getByRole('dialog');
      await dialog.getByLabel('Places for each site').fill('12');
      await looksRight(technician, 'seal-dialog');
      await technician.keyboard.press('Enter');
      await technician.getByText('0 of 24 places assigned').waitFor();
      await technician.context().close();
    }

    const page = await pageOf(running.coordinator, `${running.path}/participants`, width);
    await looksRight(page, 'participants-before');
    await page.getByRole('link', { name: 'Enrol a participant' }).focus();
    await page.keyboard.press('Enter');
    await page.getByLabel('Site').waitFor();
    await page.getByRole('button', { name: 'Enrol and make the code' }).click();
    await page.getByText('Enter the full name.').waitFor();
    await looksRight(page, 'enrolment-incomplete');
    await page.getByLabel('Site').selectOption({ label: 'TN · Site TN' });
    await page.getByLabel('Full name').fill(`${canary} ${width}`);
    await page.getByLabel('Birth date').fill('1957-08-23');
    await page.getByLabel('Phone').fill('+44 1632 960777');
    await page.getByLabel('Phone').press('Enter');
    await page.getByRole('heading', { name: 'Taking part', exact: true }).waitFor();
    const code = (await page.getByRole('heading', { level: 1 }).textContent())!;
    expect(code).toMatch(/^TN-\d{3}-[0-9A-Z]$/);
    await looksRight(page, 'participant-screening');

    // proves WS-13
    await page.getByRole('button', { name: 'Show name and contact' }).press('Enter');
    await page.getByText(`${canary} ${width}`).waitFor();
    await looksRight(page, 'participant-shown');
    expect(await kept(page)).not.toMatch(/Quillon|Featherstitch|1957-08-23|960777/);
    await page.getByRole('button', { name: 'Cover again' }).press('Enter');
    expect(await page.getByText(`${canary} ${width}`).count()).toBe(0);
    await page.getByText(`${running.coordinator.name}, coordinator`).waitFor();

    await consent(server, running.study, await state(code));
    await page.reload();
    await page.getByRole('button', { name: 'Confirm the criteria' }).press('Enter');
    const criteria = page.getByRole('dialog');
    await criteria.getByRole('checkbox').press('Space');
    await looksRight(page, 'criteria-dialog');
    await criteria.getByRole('button', { name: 'Confirm the criteria' }).press('Enter');
    await criteria.waitFor({ state: 'detached' });
    await page.getByRole('button', { name: 'Assign the next place' }).press('Enter');
    await looksRight(page, 'assign-dialog');
    await page.getByRole('dialog').getByRole('button', { name: 'Assign the place' }).press('Enter');
    await page.getByText('assigned · hidden until unblinding').waitFor();
    await looksRight(page, 'participant-allocated');
    expect((await state(code)).state).toBe('allocated');
    await page.getByRole('button', { name: 'Plan a visit' }).press('Enter');
    await page.getByRole('dialog').getByLabel('Visit').selectOption({ label: 'Period 1' });
    await looksRight(page, 'plan-visit-dialog');
    await page.getByRole('dialog').getByRole('button', { name: 'Plan the visit' }).press('Enter');
    await page.getByRole('link', { name: code }).waitFor();
    await page.getByText('0 of 1 completed').waitFor();
    await looksRight(page, 'participant-visits');
    // proves RB-04
    for (const words of [/Alder/, /Birch/, /seq-/]) expect(await page.content()).not.toMatch(words);

    await page.goto(`${server.url}${running.path}/participants`);
    await page.getByRole('link', { name: code }).waitFor();
    await page.getByLabel('Code begins with').fill('ZZ');
    await page.getByText('No participant fits these filters').waitFor();
    expect(page.url()).toContain('code=ZZ');
    await page.getByLabel('Code begins with').fill('tn');
    await page.getByRole('link', { name: code }).waitFor();
    await looksRight(page, 'participants');
    await page.context().close();

    const technician = await pageOf(running.technician, `${running.path}/allocation`, width);
    await technician
      .getByRole('row', { name: new RegExp(code) })
      .first()
      .waitFor();
    await looksRight(technician, 'worklist');
    await technician.context().close();
  });

  it('the physician opens one condition in two steps, and the others see that it happened', async () => {
    const physician = await aMember(server, 'study-physician', running.study);
    const participant = await allocate(running, await eligible(server, running, running.sites[1]!));
    const page = await pageOf(physician, `${running.path}/participants/${participant.code}`, width);
    await page.getByRole('button', { name: 'Open the condition in an emergency' }).press('Enter');
    await looksRight(page, 'emergency-first-step');
    await page.getByRole('button', { name: 'It does: go on' }).press('Enter');
    const dialog = page.getByRole('dialog');
    await dialog.getByLabel('Reason').fill('found unresponsive');
    await dialog.getByLabel('Your password, to sign').fill(password);
    await looksRight(page, 'emergency-second-step');
    await page.keyboard.press('Enter');
    await page.getByText('Period 2').waitFor();
    await looksRight(page, 'emergency-opened');
    await page.getByRole('button', { name: 'Close, and hide it again' }).press('Enter');
    await page.getByText('The condition was opened in an emergency').waitFor();
    expect(await page.content()).not.toMatch(/Alder|Birch/);
    await page.context().close();

    const other = await pageOf(
      running.coordinator,
      `${running.path}/participants/${participant.code}`,
      width,
    );
    await other.getByText('The condition was opened in an emergency').waitFor();
    expect(await other.content()).not.toMatch(/Alder|Birch|unresponsive/);
    await looksRight(other, 'participant-opened-for-others');
    await other.getByRole('button', { name: 'Record a withdrawal' }).press('Enter');
    await looksRight(other, 'withdrawal-dialog');
    const withdrawal = other.getByRole('dialog');
    await withdrawal.getByRole('button', { name: 'Record the withdrawal' }).press('Enter');
    await withdrawal.getByText('Choose a reason, or give your own.').waitFor();
    await withdrawal.getByLabel('Own wish').press('Space');
    await withdrawal.getByLabel('left out').press('Space');
    await withdrawal.getByLabel('not allowed').press('Space');
    await withdrawal.getByRole('button', { name: 'Record the withdrawal' }).press('Enter');
    await other.getByText('left out of cuts made since').waitFor();
    await looksRight(other, 'participant-withdrawn');
    await other.context().close();
  });

  it('the investigator looks in an emergency, and two people unblind a locked study and prove its list', async () => {
    const study = await aRunningStudy(server);
    const statistician = await aMember(server, 'statistician', study.study);
    const participant = await allocate(study, await eligible(server, study, study.sites[0]!));
    const investigator = await pageOf(
      study.investigator,
      `${study.path}/participants/${participant.code}`,
      width,
    );
    await investigator.getByRole('button', { name: 'Look, with a reason' }).press('Enter');
    await looksRight(investigator, 'urgent-look');
    await investigator.getByLabel('Reason').fill('found at the bus stop');
    await investigator.getByRole('dialog').getByRole('button', { name: 'Look' }).press('Enter');
    await investigator.getByText('Canary Fledgling').waitFor();
    await looksRight(investigator, 'urgent-shown');
    await investigator.goto(`${server.url}${study.path}/unblinding`);
    await investigator.getByText('Unblinding opens after the lock').waitFor();
    await looksRight(investigator, 'unblinding-running');

    await setStudyState(server, study.study, 'locked');
    const asking = await pageOf(statistician, `${study.path}/unblinding`, width);
    await asking.getByRole('button', { name: 'Ask for the unblinding' }).press('Enter');
    await asking.getByLabel('Reason').fill('the plan is signed');
    await asking.getByLabel('Your password, to sign').fill(password);
    await looksRight(asking, 'unblinding-ask');
    await asking.keyboard.press('Enter');
    await asking.getByText('You asked, so it takes somebody else.').waitFor();
    await asking.context().close();

    await investigator.reload();
    await investigator.getByRole('button', { name: 'Confirm the unblinding' }).press('Enter');
    await investigator.getByLabel('Your password, to sign').fill(password);
    await looksRight(investigator, 'unblinding-confirm');
    await investigator.keyboard.press('Enter');
    await investigator.getByRole('dialog').waitFor({ state: 'detached' });
    await investigator.getByRole('button', { name: 'Check it in this browser' }).press('Enter');
    await investigator.getByText('List and salt give the digest').waitFor();
    await investigator.getByText('The seed makes this list: no place was chosen').waitFor();
    await looksRight(investigator, 'unblinded');
    await investigator.goto(`${server.url}${study.path}/participants/${participant.code}`);
    await investigator.getByText(/Alder first|Birch first/).waitFor();
    await investigator.context().close();
  });
});
