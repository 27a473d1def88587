import type { LocalSecrets } from './local-secrets.ts';
import { isLoopback, SettingReader } from './setting-reader.ts';
import { settingTable } from './setting-table.ts';

export interface ObjectStoreSettings {
  endpoint: string | undefined;
  region: string;
  bucket: string;
  accessKeyId: string;
  secretAccessKey: string;
}

/** Keys of the identifier store: new rows under `currentKeyId`, old rows readable by theirs. */
export interface IdentityKeys {
  currentKeyId: string;
  keys: Readonly<Record<string, Buffer>>;
  indexKey: Buffer;
}

const logLevels = ['fatal', 'error', 'warn', 'info', 'debug', 'silent'] as const;

export interface Settings {
  production: boolean;
  demo: boolean;
  host: string;
  port: number;
  /** Origin, without a slash at the end. */
  publicUrl: string;
  /** Null: a PostgreSQL of our own is started. Without `ownerUrl` the start does not migrate. */
  database: { url: string; ownerUrl: string | undefined } | null;
  /** Null: a store of our own is started. */
  objectStore: ObjectStoreSettings | null;
  /** Without `smtpUrl` a mail box of our own is started. */
  mail: { smtpUrl: string | undefined; from: string };
  sessionSecret: string;
  identity: IdentityKeys;
  /** For Express's `trust proxy`; empty trusts nobody. */
  trustProxy: readonly string[];
  logLevel: (typeof logLevels)[number];
  cookieName: string;
}

/**
 * Reads every setting once, checked and frozen. Outside production a missing secret is made and kept by `secrets`.
 * @throws StartError naming each setting that is missing or wrong
 */
export function readSettings(
  environment: Readonly<Record<string, string | undefined>>,
  secrets: LocalSecrets,
): Settings {
  const read = new SettingReader(environment);
  const production = read.text('NODE_ENV') === 'production';
  if (production) {
    for (const { name, requiredInProduction } of settingTable) {
      if (requiredInProduction && !read.text(name)) read.refuse(name, 'is missing, and production needs it');
    }
  }
  const host = readHost(read);
  const port = read.integer('PORT', { from: 0, to: 65_535, fallback: 4680 });
  const publicUrl = readPublicUrl(read, localOrigin(host, port));
  const database = readDatabase(read);
  const settings: Settings = {
    production,
    demo: readDemo(read, { production, byDefault: !database && isLoopback(host) }),
    host,
    port,
    publicUrl,
    database,
    objectStore: readObjectStore(read),
    mail: {
      smtpUrl: read.url('SMTP_URL', ['smtp:', 'smtps:']),
      from: read.text('MAIL_FROM') ?? 'Vesselry <vesselry@localhost>',
    },
    sessionSecret: readSessionSecret(read, production ? undefined : secrets),
    identity: readIdentity(read, production ? undefined : secrets),
    trustProxy: readTrustProxy(read),
    logLevel: read.oneOf('LOG_LEVEL', logLevels, production ? 'info' : 'warn'),
    cookieName: readCookieName(read, publicUrl),
  };
  read.finish();
  return freezeDeeply(settings);
}

/** Address of a listener on this machine; one on all addresses is found on the loopback. */
export function localOrigin(host: string, port: number): string {
  const name = host === '0.0.0.0' || host === '::' ? '127.0.0.1' : host;
  return `http://${name.includes(':') ? `[${name}]` : name}:${port}`;
}

function readHost(read: SettingReader): string {
  const host = read.text('HOST') ?? '127.0.0.1';
  if (URL.canParse(localOrigin(host, 80))) return host;
  read.refuse('HOST', 'must be an address or a host name, without a port');
  return '127.0.0.1';
}

function readPublicUrl(read: SettingReader, fallback: string): string {
  const url = new URL(read.url('PUBLIC_URL', ['http:', 'https:']) ?? fallback);
  if (url.pathname !== '/' || url.search || url.hash || url.username) {
    read.refuse('PUBLIC_URL', 'must end after the host and port');
  }
  if (url.protocol === 'http:' && read.text('PUBLIC_URL') && !isLoopback(url.hostname)) {
    read.refuse('PUBLIC_URL', 'must begin with https:// unless it is on the loopback');
  }
  return url.origin;
}

function readDatabase(read: SettingReader): Settings['database'] {
  const postgres = ['postgresql:', 'postgres:'];
  const [url, ownerUrl] = [read.url('DATABASE_URL', postgres), read.url('DATABASE_OWNER_URL', postgres)];
  if (!url) {
    if (ownerUrl) read.refuse('DATABASE_URL', 'is missing beside DATABASE_OWNER_URL');
    return null;
  }
  if (ownerUrl && new URL(url).username === new URL(ownerUrl).username) {
    read.refuse(
      'DATABASE_URL',
      'must name another role than DATABASE_OWNER_URL: the owner could change the trail',
    );
  }
  return { url, ownerUrl };
}

function readObjectStore(read: SettingReader): ObjectStoreSettings | null {
  const endpoint = read.url('S3_ENDPOINT', ['http:', 'https:']);
  const [bucket = '', accessKeyId = '', secretAccessKey = ''] = [
    read.text('S3_BUCKET'),
    read.text('S3_ACCESS_KEY_ID'),
    read.text('S3_SECRET_ACCESS_KEY'),
  ];
  if (!bucket && !endpoint && !accessKeyId && !secretAccessKey) return null;
  const needed = { S3_BUCKET: bucket, S3_ACCESS_KEY_ID: accessKeyId, S3_SECRET_ACCESS_KEY: secretAccessKey };
  for (const [name, value] of Object.entries(needed)) {
    if (!value) read.refuse(name, 'is missing beside the other settings of the object store');
  }
  return { endpoint, region: read.text('S3_REGION') ?? 'us-east-1', bucket, accessKeyId, secretAccessKey };
}

function readDemo(
  read: SettingReader,
  { production, byDefault }: { production: boolean; byDefault: boolean },
) {
  const demo = read.oneOf('DEMO', ['true', 'false'], !production && byDefault ? 'true' : 'false') === 'true';
  if (demo && production) read.refuse('DEMO', 'cannot be true in production');
  return demo;
}

function readSessionSecret(read: SettingReader, secrets: LocalSecrets | undefined): string {
  const secret = read.text('SESSION_SECRET') ?? secrets?.('SESSION_SECRET');
  if (!secret) return '';
  if (secret.length < 32) read.refuse('SESSION_SECRET', 'must have at least 32 characters');
  else if (new Set(secret).size < 12)
    read.refuse('SESSION_SECRET', 'must be random: this one repeats itself');
  return secret;
}

function readIdentity(read: SettingReader, secrets: LocalSecrets | undefined): IdentityKeys {
  const given = read.text('IDENTITY_KEY') ?? (secrets && `local:${secrets('IDENTITY_KEY')}`) ?? '';
  const keys: Record<string, Buffer> = {};
  const pairs = given ? given.split(',').map((pair) => pair.trim()) : [];
  for (const pair of pairs) {
    const [, id, encoded] = /^([a-z0-9-]{1,32}):(.+)$/i.exec(pair) ?? [];
    if (!id || !encoded)
      read.refuse('IDENTITY_KEY', 'must be written id:base64, several separated by commas');
    else if (keys[id]) read.refuse('IDENTITY_KEY', 'names one key id twice');
    else keys[id] = read.key('IDENTITY_KEY', encoded);
  }
  const index = read.text('IDENTITY_INDEX_KEY') ?? secrets?.('IDENTITY_INDEX_KEY');
  const indexKey = index ? read.key('IDENTITY_INDEX_KEY', index) : Buffer.alloc(0);
  return { currentKeyId: Object.keys(keys)[0] ?? '', keys, indexKey };
}

function readTrustProxy(read: SettingReader): string[] {
  const addresses = (read.text('TRUST_PROXY') ?? '').split(',').map((part) => part.trim());
  const named = addresses.filter(Boolean);
  for (const address of named) {
    // "true" or a number of hops would believe a header that anybody can write.
    if (/^(true|\d+)$/.test(address))
      read.refuse('TRUST_PROXY', 'must name addresses, not a yes or a number');
  }
  return named;
}

function readCookieName(read: SettingReader, publicUrl: string): string {
  const name = read.text('COOKIE_NAME') ?? '__Host-vesselry';
  if (!/^[\w-]+$/.test(name)) read.refuse('COOKIE_NAME', 'may hold letters, digits, - and _ only');
  if (!name.startsWith('__Host-') && !isLoopback(new URL(publicUrl).hostname)) {
    read.refuse('COOKIE_NAME', 'must begin with __Host- unless PUBLIC_URL is on the loopback');
  }
  return name;
}

function freezeDeeply<T extends object>(value: T): T {
  for (const part of Object.values(value) as unknown[]) {
    // The bytes of a Buffer cannot be frozen.
    if (typeof part === 'object' && part !== null && !ArrayBuffer.isView(part)) freezeDeeply(part);
  }
  return Object.freeze(value);
}
