import type { LocalSecrets } from './local-secrets.ts';
import {
  localOrigin,
  readCookieName,
  readDatabase,
  readDemo,
  readHost,
  readIdentity,
  readObjectStore,
  readPublicUrl,
  readSessionSecret,
  readTrustProxy,
} from './setting-groups.ts';
import { isLoopback, SettingReader } from './setting-reader.ts';
import { settingTable } from './setting-table.ts';

export type { IdentityKeys } from './setting-groups.ts';

const logLevels = ['fatal', 'error', 'warn', 'info', 'debug', 'silent'] as const;

export interface Settings {
  production: boolean;
  demo: boolean;
  host: string;
  port: number;
  /** Origin, without a slash at the end. */
  publicUrl: string;
  /** Null: a PostgreSQL of our own is started. */
  database: ReturnType<typeof readDatabase>;
  /** Null: a store of our own is started. */
  objectStore: ReturnType<typeof readObjectStore>;
  /** Without `smtpUrl` a mail box of our own is started. */
  mail: { smtpUrl: string | undefined; from: string };
  sessionSecret: string;
  identity: ReturnType<typeof readIdentity>;
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

function freezeDeeply<T extends object>(value: T): T {
  for (const part of Object.values(value) as unknown[]) {
    // The bytes of a Buffer cannot be frozen.
    if (typeof part === 'object' && part !== null && !ArrayBuffer.isView(part)) freezeDeeply(part);
  }
  return Object.freeze(value);
}
