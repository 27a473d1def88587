import type { FindingDto, HiddenValue, Operation, ValueDto } from '#schemas/api/capture.ts';
import type { CompiledField, CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import type { EntryValue, EntryValues } from '#schemas/instruments/entry-values.ts';
import {
  isWrittenNumber,
  parseWrittenNumber,
  type WrittenProblem,
} from '#schemas/instruments/written-number.ts';

/** What stands at an address; `"/systolic/2!rejected"` may also be given as `rejected` of `"/systolic/2"`. */
type FormValue = (ValueDto & { rejected?: string }) | HiddenValue;
export type FormValues = Readonly<Record<string, FormValue>>;

/** One address as the form shows it. */
export interface FieldState extends ValueDto {
  rejected?: string;
  hidden?: true;
  /** Text that is being typed, or that is no value yet: never thrown away. */
  draft?: string;
  /** Why the draft is no value. */
  problem?: WrittenProblem;
}

type Listener = () => void;

const empty: FieldState = Object.freeze({});
const noFindings: readonly FindingDto[] = Object.freeze([]);

interface FormStoreOptions {
  compiled: CompiledInstrument;
  onOperation: (operation: Operation) => void;
  onDraft?: ((draft: { pointer: string; text: string }) => void) | undefined;
}

/**
 * The values of one form, outside of React: each field listens to its own address, so that a key typed or a reading
 * entered draws that field anew and no other. `tests/benchmarks/form-typing.ts` measures it.
 */
export class FormStore {
  readonly compiled: CompiledInstrument;
  #onOperation: FormStoreOptions['onOperation'];
  #onDraft: FormStoreOptions['onDraft'];
  #states = new Map<string, FieldState>();
  #findings = new Map<string, readonly FindingDto[]>();
  #versions = new Map<string, number>();
  #listeners = new Map<string, Set<Listener>>();
  #changeListeners = new Set<Listener>();
  #entryValues: EntryValues = {};

  constructor({ compiled, onOperation, onDraft }: FormStoreOptions) {
    this.compiled = compiled;
    this.#onOperation = onOperation;
    this.#onDraft = onDraft;
  }

  /** The callbacks of the latest rendering. */
  setHandlers({ onOperation, onDraft }: Omit<FormStoreOptions, 'compiled'>): void {
    this.#onOperation = onOperation;
    this.#onDraft = onDraft;
  }

  get = (address: string): FieldState => this.#states.get(address) ?? empty;

  /** Findings that stand at exactly this address. */
  findingsAt = (address: string): readonly FindingDto[] => this.#findings.get(address) ?? noFindings;

  /** Counts the changes at a field and its readings. */
  versionOf = (pointer: string): number => this.#versions.get(pointer) ?? 0;

  /** What is entered, for rules over several fields; changes in place. */
  entryValues = (): EntryValues => this.#entryValues;

  /** Tells of changes at an address, or at a field and all its readings. */
  subscribe(address: string, listener: Listener): () => void {
    const listeners = this.#listeners.get(address) ?? new Set();
    this.#listeners.set(address, listeners.add(listener));
    return () => listeners.delete(listener);
  }

  /** Tells of every change of a value; not of drafts. */
  subscribeToChanges(listener: Listener): () => void {
    this.#changeListeners.add(listener);
    return () => this.#changeListeners.delete(listener);
  }

  /** Takes values from outside: a saved entry with the changes still under way laid over it. Drafts stay. */
  setValues(values: FormValues, hiddenPointers: readonly string[] = []): void {
    const wanted = normalised(values, hiddenPointers);
    for (const address of new Set([...this.#states.keys(), ...wanted.keys()])) {
      const { draft, problem, ...present } = this.get(address);
      const next = wanted.get(address) ?? empty;
      if (sameState(present, next)) continue;
      this.#put(address, {
        ...next,
        ...(draft === undefined ? {} : { draft }),
        ...(problem ? { problem } : {}),
      });
    }
    this.#tellOfChange();
  }

  /** Text that was typed and not yet a value when the page last went away. */
  restoreDrafts(drafts: Readonly<Record<string, string>>): void {
    for (const [address, draft] of Object.entries(drafts)) {
      if (draft !== '') this.#put(address, { ...this.get(address), draft });
    }
  }

  setFindings(findings: readonly FindingDto[]): void {
    const wanted = new Map<string, FindingDto[]>();
    for (const finding of findings) {
      for (const pointer of finding.pointers) wanted.set(pointer, [...(wanted.get(pointer) ?? []), finding]);
    }
    const touched = new Set([...this.#findings.keys(), ...wanted.keys()]);
    const before = this.#findings;
    this.#findings = wanted;
    for (const pointer of touched) {
      if (JSON.stringify(before.get(pointer)) !== JSON.stringify(wanted.get(pointer))) this.#notify(pointer);
    }
  }

  /** Remembers text as it is typed; it becomes a value by `commit`. */
  type(address: string, draft: string): void {
    const { problem, ...state } = this.get(address);
    this.#states.set(address, { ...state, draft });
    // A key typed concerns its own field alone; a problem that goes away also the summary of its grid.
    this.#notify(address, problem !== undefined);
    this.#onDraft?.({ pointer: address, text: draft });
  }

  /** Makes a value of what was typed: on leaving the field, on Enter, when the page goes away. */
  commit(address: string): void {
    const { draft } = this.get(address);
    if (draft === undefined) return;
    const field = this.fieldOf(address);
    if (field?.type === 'number' || field?.type === 'integer') this.#commitNumber(address, draft);
    else
      this.change(
        draft.trim() === '' ? { pointer: address, value: null } : { pointer: address, value: draft },
      );
  }

  commitAll(): void {
    for (const [address, { draft, problem }] of this.#states)
      if (draft !== undefined && !problem) this.commit(address);
  }

  /** Changes one address here and tells the owner, unless nothing changes. */
  change(operation: Operation): void {
    const { pointer } = operation;
    const { draft: _draft, problem: _problem, ...before } = this.get(pointer);
    const after = applied(before, operation);
    const same = sameState(before, after);
    this.#put(pointer, after);
    this.#onDraft?.({ pointer, text: '' });
    if (same) return;
    this.#onOperation(operation);
    this.#tellOfChange();
  }

  /** Leaves the draft and shows what was there before. */
  dropDraft(address: string): void {
    const { draft: _draft, problem: _problem, ...state } = this.get(address);
    this.#put(address, state);
    this.#onDraft?.({ pointer: address, text: '' });
  }

  /** The field that an address belongs to: itself, or the one it is a reading of. */
  fieldOf(address: string): CompiledField | undefined {
    return this.compiled.field(address) ?? this.compiled.field(parentOf(address));
  }

  #commitNumber(address: string, draft: string): void {
    const result = parseWrittenNumber(draft);
    if (isWrittenNumber(result)) {
      this.change({ pointer: address, value: result.value, written: result.written });
    } else if (result.code === 'blank') {
      this.change({ pointer: address, value: null });
    } else {
      this.#put(address, { ...this.get(address), problem: result });
    }
  }

  #put(address: string, state: FieldState): void {
    this.#states.set(address, state);
    const value = entryValueOf(state);
    const values = this.#entryValues;
    if (value === undefined) delete values[address];
    else values[address] = value;
    if (state.rejected === undefined) delete values[`${address}!rejected`];
    else values[`${address}!rejected`] = state.rejected;
    this.#notify(address);
  }

  #notify(address: string, withParent = true): void {
    for (const pointer of withParent ? [address, parentOf(address)] : [address]) {
      this.#versions.set(pointer, this.versionOf(pointer) + 1);
      for (const listener of this.#listeners.get(pointer) ?? []) listener();
    }
  }

  #tellOfChange(): void {
    for (const listener of this.#changeListeners) listener();
  }
}

/** `/systolic` of `/systolic/2`; of a field itself, the group around it. */
const parentOf = (address: string): string => address.slice(0, Math.max(0, address.lastIndexOf('/')));

function normalised(values: FormValues, hiddenPointers: readonly string[]): Map<string, FieldState> {
  const states = new Map<string, FieldState>();
  for (const [key, value] of Object.entries(values)) {
    const address = key.replace(/!rejected$/, '');
    if (address === key) states.set(address, { ...states.get(address), ...value });
    else if ('value' in value) states.set(address, { ...states.get(address), rejected: String(value.value) });
  }
  for (const pointer of hiddenPointers) states.set(pointer, { hidden: true });
  return states;
}

function applied(state: FieldState, { value, written, missing, rejected }: Operation): FieldState {
  if (rejected !== undefined) {
    const { rejected: _, ...rest } = state;
    return rejected === null ? rest : { ...rest, rejected };
  }
  const kept = state.rejected === undefined ? {} : { rejected: state.rejected };
  if (missing !== undefined) return { ...kept, missing };
  if (value === null || value === undefined) return kept;
  return { ...kept, value, ...(written === undefined ? {} : { written }) };
}

function entryValueOf({ value, missing, hidden }: FieldState): EntryValue | undefined {
  if (hidden) return undefined;
  return missing === undefined ? value : { missing };
}

const sameState = (one: FieldState, other: FieldState): boolean =>
  one === other || JSON.stringify(inOrder(one)) === JSON.stringify(inOrder(other));

const inOrder = ({ value, written, missing, rejected, hidden, unit, rule, cautions }: FieldState) => [
  value,
  written,
  missing,
  rejected,
  hidden,
  unit,
  rule,
  cautions,
];
