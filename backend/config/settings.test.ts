import { randomBytes } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { localSecrets } from './local-secrets.ts';
import { readSettings } from './settings.ts';
import { settingTable } from './setting-table.ts';
import { StartError } from './start-error.ts';

const key = () => randomBytes(32).toString('base64');
const madeSecrets = () => {
  const made = new Map<string, string>();
  return (name: string) => {
    if (!made.has(name)) made.set(name, randomBytes(32).toString('base64url'));
    return made.get(name)!;
  };
};
const noSecrets = (name: string): string => {
  throw new Error(`production asked for a made-up ${name}`);
};

const production: Record<string, string> = {
  NODE_ENV: 'production',
  PUBLIC_URL: 'https://vesselry.example',
  DATABASE_URL: 'postgresql://vesselry_app:pw@db.example/vesselry',
  S3_BUCKET: 'bucket',
  S3_ACCESS_KEY_ID: 'id',
  S3_SECRET_ACCESS_KEY: 'secret',
  SMTP_URL: 'smtps://user:pw@mail.example:465',
  MAIL_FROM: 'Vesselry <no-reply@vesselry.example>',
  SESSION_SECRET: randomBytes(32).toString('base64'),
  IDENTITY_KEY: `k1:${key()}`,
  IDENTITY_INDEX_KEY: key(),
};

const problemsOf = (environment: Record<string, string | undefined>, secrets = madeSecrets()) => {
  try {
    readSettings(environment, secrets);
    return [];
  } catch (error) {
    if (!(error instanceof StartError)) throw error;
    return error.message
      .split('\n')
      .slice(1)
      .map((line) => line.trim());
  }
};

describe('settings', () => {
  it('need nothing in development: own services, demo, made secrets', () => {
    const settings = readSettings({}, madeSecrets());

    expect(settings).toMatchObject({
      production: false,
      demo: true,
      host: '127.0.0.1',
      port: 4680,
      publicUrl: 'http://127.0.0.1:4680',
      database: null,
      objectStore: null,
      logLevel: 'warn',
      cookieName: '__Host-vesselry',
      trustProxy: [],
    });
    expect(settings.mail.smtpUrl).toBeUndefined();
    expect(settings.sessionSecret.length).toBeGreaterThanOrEqual(32);
    expect(settings.identity.keys[settings.identity.currentKeyId]).toHaveLength(32);
    expect(settings.identity.indexKey).toHaveLength(32);
  });

  it('are frozen to the bottom', () => {
    const settings = readSettings({}, madeSecrets());

    expect(() => Object.assign(settings, { demo: false })).toThrow(TypeError);
    expect(() => Object.assign(settings.mail, { from: 'x' })).toThrow(TypeError);
    expect(() => Object.assign(settings.identity.keys, { other: Buffer.alloc(32) })).toThrow(TypeError);
  });

  it('take an unset and an empty variable alike', () => {
    expect(readSettings({ PORT: '', S3_BUCKET: ' ' }, madeSecrets())).toMatchObject({
      port: 4680,
      objectStore: null,
    });
  });

  it.each([
    ['PORT', '80 80'],
    ['PORT', '70000'],
    ['PORT', '-1'],
    ['HOST', 'a b'],
    ['PUBLIC_URL', 'vesselry.example'],
    ['PUBLIC_URL', 'http://vesselry.example'],
    ['PUBLIC_URL', 'https://vesselry.example/app'],
    ['DATABASE_URL', 'mysql://db.example/vesselry'],
    ['DATABASE_URL', 'postgresql://user@/db?host=/run/postgresql'],
    ['S3_ENDPOINT', 'store.example'],
    ['SMTP_URL', 'http://mail.example'],
    ['SESSION_SECRET', 'short'],
    ['SESSION_SECRET', 'a'.repeat(64)],
    ['IDENTITY_KEY', randomBytes(32).toString('hex')],
    ['IDENTITY_KEY', `k1:${randomBytes(16).toString('base64')}`],
    ['IDENTITY_KEY', `k1:${Buffer.alloc(32).toString('base64')}`],
    ['IDENTITY_KEY', `k1:${key()},k1:${key()}`],
    ['IDENTITY_INDEX_KEY', 'c2hvcnQ='],
    ['DEMO', 'yes'],
    ['TRUST_PROXY', 'true'],
    ['TRUST_PROXY', '1'],
    ['LOG_LEVEL', 'loud'],
    ['COOKIE_NAME', 'a;b'],
  ])('refuse a wrong %s (%s) by its name', (name, value) => {
    const problems = problemsOf({ [name]: value });

    expect(problems.some((problem) => problem.startsWith(`${name} `))).toBe(true);
    expect(problems.join()).not.toContain(value.length > 12 ? value : '\0');
  });

  it('tell everything that is wrong at once', () => {
    expect(problemsOf({ PORT: 'x', LOG_LEVEL: 'loud', DEMO: 'perhaps' })).toHaveLength(3);
  });

  it('tell what is missing beside a part of a group', () => {
    expect(problemsOf({ S3_BUCKET: 'b' })).toEqual([
      expect.stringContaining('S3_ACCESS_KEY_ID is missing'),
      expect.stringContaining('S3_SECRET_ACCESS_KEY is missing'),
    ]);
    expect(problemsOf({ DATABASE_OWNER_URL: 'postgresql://owner@db.example/v' })).toEqual([
      expect.stringContaining('DATABASE_URL is missing'),
    ]);
  });

  // proves AC-09
  it('refuse the owner as the role of the application', () => {
    const url = 'postgresql://vesselry:pw@db.example/vesselry';
    expect(problemsOf({ DATABASE_URL: url, DATABASE_OWNER_URL: url })).toEqual([
      expect.stringContaining('another role than DATABASE_OWNER_URL'),
    ]);
  });

  // proves RT-05
  it('take older keys beside the present one', () => {
    const [now, before] = [key(), key()];
    const { identity } = readSettings({ IDENTITY_KEY: `k2:${now}, k1:${before}` }, madeSecrets());

    expect(identity.currentKeyId).toBe('k2');
    expect(identity.keys['k1']?.toString('base64')).toBe(before);
  });

  it('start no demo on a given database, or for the network, unless told to', () => {
    const database = { DATABASE_URL: 'postgresql://app@db.example/v' };
    expect(readSettings(database, madeSecrets()).demo).toBe(false);
    expect(readSettings({ HOST: '0.0.0.0' }, madeSecrets()).demo).toBe(false);
    expect(readSettings({ ...database, DEMO: 'true' }, madeSecrets()).demo).toBe(true);
  });

  it('allow another cookie name on the loopback only', () => {
    expect(readSettings({ COOKIE_NAME: 'vesselry' }, madeSecrets()).cookieName).toBe('vesselry');
    expect(problemsOf({ COOKIE_NAME: 'vesselry', PUBLIC_URL: 'https://vesselry.example' })).toEqual([
      expect.stringContaining('__Host-'),
    ]);
  });
});

// proves WS-16
describe('production', () => {
  it('starts with everything given, without demo', () => {
    expect(readSettings(production, noSecrets)).toMatchObject({
      production: true,
      demo: false,
      logLevel: 'info',
    });
  });

  const required = settingTable.filter((row) => row.requiredInProduction).map((row) => row.name);

  it.each(required)('refuses to start without %s', (name) => {
    const problems = problemsOf({ ...production, [name]: undefined }, noSecrets);

    expect(problems.some((problem) => problem.startsWith(`${name} is missing`))).toBe(true);
  });

  it('names every missing setting at once and makes up no secret', () => {
    const problems = problemsOf({ NODE_ENV: 'production' }, noSecrets);

    for (const name of required) expect(problems).toContain(`${name} is missing, and production needs it`);
  });

  it('refuses demo data', () => {
    expect(problemsOf({ ...production, DEMO: 'true' })).toEqual(['DEMO cannot be true in production']);
  });

  it('refuses an address without TLS', () => {
    expect(problemsOf({ ...production, PUBLIC_URL: 'http://vesselry.example' })).toEqual([
      expect.stringContaining('PUBLIC_URL must begin with https://'),
    ]);
  });
});

describe('the table of settings', () => {
  it('names each setting once, with purpose and default', () => {
    const names = settingTable.map((row) => row.name);
    expect(new Set(names).size).toBe(names.length);
    expect(settingTable.every((row) => row.purpose && row.fallback)).toBe(true);
  });

  it('names every setting that the code reads', () => {
    const sources = ['settings.ts', 'setting-groups.ts', 'local-secrets.ts'].map((name) =>
      readFileSync(join(import.meta.dirname, name), 'utf8'),
    );
    const calls = /(?:text|url|key|integer|oneOf)\('([A-Z0-9_]+)'|environment\['([A-Z_]+)'\]/g;
    const read = new Set(
      sources.flatMap((text) => [...text.matchAll(calls)].map((match) => match[1] ?? match[2])),
    );
    const elsewhere = new Set(['CHROMIUM']); // by the tests' browser

    expect(read.size).toBeGreaterThan(15);
    expect(
      settingTable
        .map((row) => row.name)
        .filter((name) => !elsewhere.has(name))
        .sort(),
    ).toEqual([...read].sort());
  });
});

describe('local secrets', () => {
  let folder: string;
  beforeEach(() => {
    folder = mkdtempSync(join(tmpdir(), 'vesselry-secrets-'));
  });
  afterEach(() => rmSync(folder, { recursive: true }));

  it('are made once and kept for their owner alone', () => {
    const first = localSecrets(folder)('SESSION_SECRET');
    const other = localSecrets(folder)('IDENTITY_KEY');

    expect(localSecrets(folder)('SESSION_SECRET')).toBe(first);
    expect(Buffer.from(first, 'base64url')).toHaveLength(32);
    expect(other).not.toBe(first);
    expect(statSync(join(folder, 'secrets.json')).mode & 0o777).toBe(0o600);
  });

  it('are refused, not overwritten, when their file is broken', () => {
    writeFileSync(join(folder, 'secrets.json'), '{"SESSION_SECRET": "cut o');

    expect(() => localSecrets(folder)('IDENTITY_KEY')).toThrow(StartError);
    expect(readFileSync(join(folder, 'secrets.json'), 'utf8')).toBe('{"SESSION_SECRET": "cut o');
  });
});
