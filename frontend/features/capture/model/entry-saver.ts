import type { EntryDto, HiddenValue, Operation, RefusalDto, ValueDto } from '#schemas/api/capture.ts';
import { ApiProblem, OfflineError } from '../../../lib/api.ts';

/** What someone else stored at an address while it was changed here: a person chooses. */
export interface Conflict {
  address: string;
  mine: Operation;
  theirs: ValueDto | HiddenValue | null;
  by: string;
  at: string;
}

export interface SaverState {
  phase: 'saved' | 'waiting' | 'saving' | 'offline' | 'stopped';
  revision: number;
  /** When the server acknowledged last; null before the first save here. */
  savedAt: string | null;
  /** Changes not yet acknowledged. */
  waiting: number;
  conflicts: Conflict[];
  /** Values an edit check turned away; still shown, not stored. */
  refused: RefusalDto[];
  /** Why nothing is sent any more, e.g. the study was locked. */
  stopped: string | null;
}

interface Batch {
  key: string;
  operations: Operation[];
  confirmations: { checkId: string; reason: string }[];
}

export interface SaverPorts {
  /** Sends a batch; answers with the entry as it is then. */
  send: (batch: Batch, revision: number) => Promise<EntryDto>;
  /** The server has these now. */
  acknowledged: (operations: readonly Operation[]) => void;
  /** The entry as the server has it. */
  received: (entry: EntryDto) => void;
  now: () => string;
  later: (work: () => void, milliseconds: number) => void;
}

const addressOf = ({ pointer, rejected }: Operation): string =>
  rejected === undefined ? pointer : `${pointer}!rejected`;

const quiet = 400;
const retryAfter = 3000;

/**
 * Saves one entry by operations on single readings. One save is in flight at a time and is sent again unchanged
 * after a lost answer; what is typed meanwhile waits. Other people's changes of other fields merge by themselves;
 * of the same field, a person chooses.
 */
export class EntrySaver {
  #ports: SaverPorts;
  #state: SaverState;
  #waiting = new Map<string, Operation>();
  #confirmations = new Map<string, string>();
  /** The newest change at each address, also after it was turned away. */
  #last = new Map<string, Operation>();
  #flight: Batch | null = null;
  #scheduled = false;
  #sending = false;
  #listeners = new Set<() => void>();

  constructor(revision: number, ports: SaverPorts) {
    this.#ports = ports;
    this.#state = {
      phase: 'saved',
      revision,
      savedAt: null,
      waiting: 0,
      conflicts: [],
      refused: [],
      stopped: null,
    };
  }

  get state(): SaverState {
    return this.#state;
  }

  subscribe = (listener: () => void): (() => void) => {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  };

  /** Takes a change; several that come together go in one save. */
  change(operation: Operation): void {
    this.#waiting.set(addressOf(operation), operation);
    this.#last.set(addressOf(operation), operation);
    this.#set({ refused: this.#state.refused.filter(({ pointer }) => pointer !== addressOf(operation)) });
    this.#schedule(quiet);
  }

  /** What is shown here and not stored there: waiting, in flight, turned away, or in conflict. */
  unsaved(): Operation[] {
    return [
      ...this.#state.refused.flatMap(({ pointer }) => this.#last.get(pointer) ?? []),
      ...this.#state.conflicts.map(({ mine }) => mine),
      ...(this.#flight?.operations ?? []),
      ...this.#waiting.values(),
    ];
  }

  /** What was last entered here at an address. */
  lastAt(address: string): Operation | undefined {
    return this.#last.get(address);
  }

  /** Keeps a value that a soft check asked about, with the reason. */
  confirm(checkId: string, reason: string, operations: readonly Operation[]): void {
    this.#confirmations.set(checkId, reason);
    for (const operation of operations) this.#waiting.set(addressOf(operation), operation);
    this.#set({ refused: this.#state.refused.filter((one) => one.checkId !== checkId) });
    this.#schedule(0);
  }

  /** Settles a conflict: mine is sent over theirs, or theirs stays. */
  resolve(address: string, choice: 'mine' | 'theirs'): void {
    const conflict = this.#state.conflicts.find((one) => one.address === address);
    if (conflict === undefined) return;
    if (choice === 'mine') this.#waiting.set(address, conflict.mine);
    else this.#ports.acknowledged([conflict.mine]);
    this.#set({ conflicts: this.#state.conflicts.filter((one) => one !== conflict) });
    this.#schedule(0);
  }

  /** Someone else's revision became known, e.g. by loading the entry again. */
  sawRevision(revision: number): void {
    if (this.#flight === null && !this.#sending) this.#set({ revision });
  }

  /** Tries at once, e.g. when the network is back. */
  flush(): void {
    if (this.#state.phase === 'offline') this.#set({ phase: 'waiting' });
    this.#schedule(0);
  }

  #schedule(milliseconds: number): void {
    if (this.#scheduled || this.#state.stopped !== null) return;
    this.#scheduled = true;
    this.#ports.later(() => {
      this.#scheduled = false;
      void this.#save();
    }, milliseconds);
  }

  async #save(): Promise<void> {
    if (this.#sending) return;
    this.#flight ??= this.#nextBatch();
    if (this.#flight === null) return;
    this.#sending = true;
    this.#set({ phase: 'saving' });
    try {
      const entry = await this.#ports.send(this.#flight, this.#state.revision);
      this.#landed(entry.revision, entry.refused);
      this.#ports.received(entry);
    } catch (error) {
      this.#failed(error);
    } finally {
      this.#sending = false;
    }
    if (this.#waiting.size > 0 && this.#state.phase !== 'offline') this.#schedule(0);
  }

  #nextBatch(): Batch | null {
    if (this.#waiting.size === 0) return null;
    const operations = [...this.#waiting.values()];
    const confirmations = [...this.#confirmations].map(([checkId, reason]) => ({ checkId, reason }));
    this.#waiting.clear();
    this.#confirmations.clear();
    return { key: crypto.randomUUID(), operations, confirmations };
  }

  /** The batch has its answer: what was refused stays to be seen, the rest is acknowledged. */
  #landed(revision: number, refused: readonly RefusalDto[]): void {
    const turned = new Set(refused.map(({ pointer }) => pointer));
    const stored = (this.#flight?.operations ?? []).filter((operation) => !turned.has(addressOf(operation)));
    this.#flight = null;
    this.#ports.acknowledged(stored);
    this.#set({
      phase: this.#waiting.size > 0 ? 'waiting' : 'saved',
      revision,
      savedAt: stored.length > 0 ? this.#ports.now() : this.#state.savedAt,
      refused: [...this.#state.refused.filter(({ pointer }) => !turned.has(pointer)), ...refused],
    });
  }

  #failed(error: unknown): void {
    if (error instanceof OfflineError || (error instanceof ApiProblem && error.status >= 500)) {
      // The answer may be lost while the save was not: the same batch goes again with the same key.
      this.#set({ phase: 'offline' });
      this.#schedule(retryAfter);
      return;
    }
    if (!(error instanceof ApiProblem)) throw error;
    if (error.slug === 'stale-revision') this.#merge(error);
    else if (error.slug === 'fields-refused') {
      this.#landed(this.#state.revision, error.members['refused'] as RefusalDto[]);
    } else if (error.status === 429) {
      this.#set({ phase: 'waiting' });
      this.#schedule(retryAfter);
    } else this.#stop(error);
  }

  /** Others changed the entry: fields of their own merge, the same field waits for a choice. */
  #merge(error: ApiProblem): void {
    const changed = error.members['changed'] as
      { address: string; by: string; at: string; present: Conflict['theirs'] }[] | undefined;
    const revision = error.members['currentRevision'];
    const theirs = new Map((changed ?? []).map((one) => [one.address, one]));
    const conflicts: Conflict[] = [];
    for (const operation of this.#flight?.operations ?? []) {
      const address = addressOf(operation);
      const other = theirs.get(address);
      if (other === undefined) {
        if (!this.#waiting.has(address)) this.#waiting.set(address, operation);
      } else {
        conflicts.push({ address, mine: operation, theirs: other.present, by: other.by, at: other.at });
      }
    }
    for (const { checkId, reason } of this.#flight?.confirmations ?? [])
      this.#confirmations.set(checkId, reason);
    this.#flight = null;
    this.#set({
      phase: 'waiting',
      revision: typeof revision === 'number' ? revision : this.#state.revision,
      conflicts: [...this.#state.conflicts, ...conflicts],
    });
    this.#schedule(0);
  }

  /** The server will not take it: what was typed stays here and on the device, to be seen. */
  #stop(error: ApiProblem): void {
    for (const operation of this.#flight?.operations ?? [])
      this.#waiting.set(addressOf(operation), operation);
    this.#flight = null;
    this.#set({
      phase: 'stopped',
      stopped: error.errors[0] ? `${error.detail} ${error.errors[0].detail}` : error.detail,
    });
  }

  #set(change: Partial<SaverState>): void {
    const waiting = this.#waiting.size + (this.#flight?.operations.length ?? 0);
    const phase = change.phase ?? this.#state.phase;
    this.#state = {
      ...this.#state,
      ...change,
      waiting,
      phase: phase === 'saved' && waiting > 0 ? 'waiting' : phase,
    };
    for (const listener of this.#listeners) listener();
  }
}
