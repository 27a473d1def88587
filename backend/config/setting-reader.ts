import { isIP } from 'node:net';
import { StartError } from './start-error.ts';

type Environment = Readonly<Record<string, string | undefined>>;

/** Reads settings one by one and gathers what is wrong, so that one start tells all of it. */
export class SettingReader {
  readonly #environment: Environment;
  readonly #problems: string[] = [];

  constructor(environment: Environment) {
    this.#environment = environment;
  }

  /** Notes a problem; texts name the setting and never repeat its value, which may be a secret. */
  refuse(name: string, problem: string): void {
    this.#problems.push(`${name} ${problem}`);
  }

  /** The value, or undefined when unset or empty. */
  text(name: string): string | undefined {
    return this.#environment[name]?.trim() || undefined;
  }

  oneOf<const T extends string>(name: string, choices: readonly T[], fallback: T): T {
    const value = this.text(name);
    const choice = choices.find((candidate) => candidate === value);
    if (value && !choice) this.refuse(name, `must be one of ${choices.join(', ')}`);
    return choice ?? fallback;
  }

  integer(name: string, { from, to, fallback }: { from: number; to: number; fallback: number }): number {
    const value = this.text(name) ?? String(fallback);
    const number = /^\d+$/.test(value) ? Number(value) : NaN;
    if (number >= from && number <= to) return number;
    this.refuse(name, `must be a whole number from ${from} to ${to}`);
    return fallback;
  }

  url(name: string, protocols: readonly string[]): string | undefined {
    const value = this.text(name);
    if (!value || (URL.canParse(value) && protocols.includes(new URL(value).protocol))) return value;
    this.refuse(name, `must be an address beginning with ${protocols.map((p) => `${p}//`).join(' or ')}`);
    return undefined;
  }

  /** 32 bytes in base64 or base64url. */
  key(name: string, encoded: string): Buffer {
    const bytes = Buffer.from(encoded, 'base64');
    if (bytes.length !== 32) this.refuse(name, 'must hold the base64 of 32 bytes');
    else if (new Set(bytes).size < 12) this.refuse(name, 'must be random: this key repeats itself');
    return bytes;
  }

  /** Ends the reading; throws with every problem found. */
  finish(): void {
    if (this.#problems.length === 0) return;
    throw new StartError(`Settings that need attention:\n${this.#problems.map((p) => `  ${p}`).join('\n')}`);
  }
}

/** Whether a host name or address can only mean this machine. */
export function isLoopback(host: string): boolean {
  const bare = host.replace(/^\[|\]$/g, '');
  return bare === 'localhost' || bare === '::1' || (isIP(bare) === 4 && bare.startsWith('127.'));
}
