import type { LocalSecrets } from './local-secrets.ts';
import { isLoopback, type SettingReader } from './setting-reader.ts';

/** Without `ownerUrl` the start does not migrate. */
interface DatabaseSettings {
  url: string;
  ownerUrl: string | undefined;
}

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

/** Address of a listener on this machine; one on all addresses is found on the loopback. */
export function localOrigin(host: string, port: number): string {
  const name = host === '0.0.0.0' || host === '::' ? '127.0.0.1' : host;
  return `http://${name.includes(':') ? `[${name}]` : name}:${port}`;
}

export function readHost(read: SettingReader): string {
  const host = read.text('HOST') ?? '127.0.0.1';
  if (URL.canParse(localOrigin(host, 80))) return host;
  read.refuse('HOST', 'must be an address or a host name, without a port');
  return '127.0.0.1';
}

export function readPublicUrl(read: SettingReader, fallback: string): string {
  const url = new URL(read.url('PUBLIC_URL', ['http:', 'https:']) ?? fallback);
  if (url.pathname !== '/' || url.search || url.hash || url.username) {
    read.refuse('PUBLIC_URL', 'must end after the host and port');
  }
  if (url.protocol === 'http:' && read.text('PUBLIC_URL') && !isLoopback(url.hostname)) {
    read.refuse('PUBLIC_URL', 'must begin with https:// unless it is on the loopback');
  }
  return url.origin;
}

export function readDatabase(read: SettingReader): DatabaseSettings | null {
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

export function readObjectStore(read: SettingReader): ObjectStoreSettings | null {
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

export function readDemo(
  read: SettingReader,
  { production, byDefault }: { production: boolean; byDefault: boolean },
) {
  const demo = read.oneOf('DEMO', ['true', 'false'], !production && byDefault ? 'true' : 'false') === 'true';
  if (demo && production) read.refuse('DEMO', 'cannot be true in production');
  return demo;
}

export function readSessionSecret(read: SettingReader, secrets: LocalSecrets | undefined): string {
  const secret = read.text('SESSION_SECRET') ?? secrets?.('SESSION_SECRET');
  if (!secret) return '';
  if (secret.length < 32) read.refuse('SESSION_SECRET', 'must have at least 32 characters');
  else if (new Set(secret).size < 12)
    read.refuse('SESSION_SECRET', 'must be random: this one repeats itself');
  return secret;
}

export function readIdentity(read: SettingReader, secrets: LocalSecrets | undefined): IdentityKeys {
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

export function readTrustProxy(read: SettingReader): string[] {
  const addresses = (read.text('TRUST_PROXY') ?? '').split(',').map((part) => part.trim());
  const named = addresses.filter(Boolean);
  for (const address of named) {
    // "true" or a number of hops would believe a header that anybody can write.
    if (/^(true|\d+)$/.test(address))
      read.refuse('TRUST_PROXY', 'must name addresses, not a yes or a number');
  }
  return named;
}

export function readCookieName(read: SettingReader, publicUrl: string): string {
  const name = read.text('COOKIE_NAME') ?? '__Host-vesselry';
  if (!/^[\w-]+$/.test(name)) read.refuse('COOKIE_NAME', 'may hold letters, digits, - and _ only');
  if (!name.startsWith('__Host-') && !isLoopback(new URL(publicUrl).hostname)) {
    read.refuse('COOKIE_NAME', 'must begin with __Host- unless PUBLIC_URL is on the loopback');
  }
  return name;
}
