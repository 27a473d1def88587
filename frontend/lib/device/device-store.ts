import { openDB, type DBSchema, type IDBPDatabase } from 'idb';
import { sealed, unsealed, type Sealed } from './seal.ts';

/** Whose, and where: changes of one person never meet another's on the same tablet. */
export interface ChangeKey {
  personId: string;
  studyCode: string;
  entryId: string;
  /** JSON pointer of the field or single reading. */
  address: string;
}

export interface UnsentChange<Operation> extends ChangeKey {
  operation: Operation;
  /** When it was typed, by this device's clock. */
  typedAt: string;
  /** Told at acknowledgement, so that what was typed meanwhile stays. */
  token: string;
}

interface Row extends ChangeKey {
  typedAt: string;
  token: string;
  content: Sealed;
}

interface Shape extends DBSchema {
  unsent: { key: [string, string, string, string]; value: Row };
}

const databaseName = 'vesselry-unsent';
let connection: Promise<IDBPDatabase<Shape>> | undefined;

/**
 * What the server has not acknowledged yet, and nothing else (WS-13): no server data, no direct identifiers.
 * Contents are sealed with the person's device key, which the server gives to that person alone, so the next
 * person on the tablet cannot read them.
 */
export class DeviceStore {
  readonly #personId: string;
  readonly #key: CryptoKey;

  constructor(personId: string, key: CryptoKey) {
    this.#personId = personId;
    this.#key = key;
  }

  /** Keeps a change; a later one at the same address replaces it. */
  async keep<Operation>(
    change: Omit<ChangeKey, 'personId'> & { operation: Operation; typedAt: string },
  ): Promise<UnsentChange<Operation>> {
    const { operation, ...place } = change;
    const token = crypto.randomUUID();
    const content = await sealed(operation, this.#key);
    await (await open()).put('unsent', { ...place, personId: this.#personId, token, content });
    return { ...change, personId: this.#personId, token };
  }

  /** The changes of this person in a study, or in one entry of it, in the order typed. */
  async unsent<Operation>(studyCode?: string, entryId?: string): Promise<UnsentChange<Operation>[]> {
    const rows = await (await open()).getAll('unsent', range(this.#personId, studyCode, entryId));
    const changes = await Promise.all(
      rows.map(async ({ content, ...row }) => ({
        ...row,
        operation: await unsealed<Operation>(content, this.#key),
      })),
    );
    return changes.sort((a, b) => a.typedAt.localeCompare(b.typedAt));
  }

  async count(studyCode?: string, entryId?: string): Promise<number> {
    return (await open()).count('unsent', range(this.#personId, studyCode, entryId));
  }

  /** Forgets changes that the server has; one typed anew since then stays. */
  async acknowledge(changes: (ChangeKey & { token: string })[]): Promise<void> {
    const transaction = (await open()).transaction('unsent', 'readwrite');
    for (const change of changes) {
      const key = keyOf(change);
      const present = await transaction.store.get(key);
      if (present?.token === change.token) await transaction.store.delete(key);
    }
    await transaction.done;
  }

  /** Forgets everything of this person: at sign-out. */
  async wipe(): Promise<void> {
    await (await open()).delete('unsent', range(this.#personId));
  }
}

const keyOf = ({ personId, studyCode, entryId, address }: ChangeKey): [string, string, string, string] => [
  personId,
  studyCode,
  entryId,
  address,
];

/** All keys beginning with the given parts: an array sorts after every string. */
function range(...given: (string | undefined)[]): IDBKeyRange {
  const parts = given.filter((part) => part !== undefined);
  return IDBKeyRange.bound(parts, [...parts, []]);
}

function open(): Promise<IDBPDatabase<Shape>> {
  connection ??= openDB<Shape>(databaseName, 1, {
    upgrade: (database) => {
      database.createObjectStore('unsent', { keyPath: ['personId', 'studyCode', 'entryId', 'address'] });
    },
    terminated: () => {
      connection = undefined;
    },
  });
  return connection;
}
