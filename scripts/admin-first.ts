import { RequestContext } from '@mikro-orm/postgresql';
import { parseArgs } from 'node:util';
import { connect } from '#backend/database/orm.ts';
import { runAs } from '#backend/http/actor.ts';
import { Problem } from '#backend/http/problem.ts';
import { problemsOf } from '#backend/http/validate.ts';
import { asSystem, inviteFirstAdministrator } from '#backend/modules/accounts/index.ts';
import { prepareDatabase } from '#backend/prepare-database.ts';
import { invitePersonBody } from '#schemas/api/people.ts';
import { withDatabase } from './lib/with-database.ts';

// npm run admin:first -- --email ADDRESS --name "NAME" — prints the one-time link of the first administrator.
const usage = 'usage: npm run admin:first -- --email ada@your.laboratory --name "Ada Example"';
const { values } = parseArgs({
  options: { email: { type: 'string' }, name: { type: 'string' } },
  strict: false,
});
const { email, name } = values;
if (
  typeof email !== 'string' ||
  typeof name !== 'string' ||
  problemsOf(invitePersonBody, { email, name }).length > 0
) {
  console.error(usage);
  process.exit(2);
}

await withDatabase(async ({ settings, url, ownerUrl }) => {
  await prepareDatabase(ownerUrl);
  const orm = await connect(url);
  try {
    const { path, validHours } = await RequestContext.create(orm.em, () =>
      runAs(asSystem, () => inviteFirstAdministrator(orm.em, { email, name })),
    );
    console.log(
      `Open this once, within ${validHours} hours, and choose a password:\n${settings.publicUrl}${path}`,
    );
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    console.error(error.detail);
    process.exitCode = 1;
  } finally {
    await orm.close(true);
  }
});
