import { describe, expect, it, vi } from 'vitest';
import type { Operation } from '#schemas/api/capture.ts';
import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { FormStore, type FormValues } from './form-store.ts';

const schema: InstrumentSchema = {
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  instrumentKey: 'trial',
  title: 'Trial',
  type: 'object',
  additionalProperties: false,
  properties: {
    height: { type: 'number', title: 'Height', unit: 'cm' },
    note: { type: 'string', title: 'Note' },
    systolic: {
      type: 'array',
      title: 'Systolic',
      unit: 'mm[Hg]',
      items: { type: 'number' },
      maxItems: 4,
      readings: { count: 3, minimum: 2, use: 'all', summary: 'mean', replaceRejected: true },
    },
  },
};
const compiled = compilePublished(schema, { get: () => undefined });

function storeWith(values: FormValues = {}) {
  const operations: Operation[] = [];
  const onDraft = vi.fn();
  const store = new FormStore({ compiled, onOperation: (operation) => operations.push(operation), onDraft });
  store.setValues(values);
  return { store, operations, onDraft };
}

describe('FormStore', () => {
  it('makes a number of what was typed and keeps its digits', () => {
    const { store, operations } = storeWith();
    store.type('/height', '172.50');
    expect(operations).toEqual([]);
    store.commit('/height');
    expect(operations).toEqual([{ pointer: '/height', value: 172.5, written: '172.50' }]);
    expect(store.get('/height')).toEqual({ value: 172.5, written: '172.50' });
  });

  it('takes 5.5 and 5.50 for two different writings of one value', () => {
    const { store, operations } = storeWith({ '/height': { value: 5.5, written: '5.5' } });
    store.type('/height', '5.50');
    store.commit('/height');
    expect(operations).toEqual([{ pointer: '/height', value: 5.5, written: '5.50' }]);
  });

  it('says nothing when nothing changed', () => {
    const { store, operations } = storeWith({ '/height': { value: 172.5, written: '172.50' } });
    store.type('/height', '172.50');
    store.commit('/height');
    store.commit('/note');
    expect(operations).toEqual([]);
  });

  it('keeps a decimal comma as typed and asks, never reading it as a point', () => {
    const { store, operations } = storeWith();
    store.type('/height', '172,5');
    store.commit('/height');
    expect(operations).toEqual([]);
    expect(store.get('/height')).toMatchObject({ draft: '172,5', problem: { suggestion: '172.5' } });
  });

  it('takes a value away when its field is emptied, and no other', () => {
    const { store, operations } = storeWith({ '/systolic/0': { value: 118, written: '118' } });
    store.type('/systolic/0', ' ');
    store.commit('/systolic/0');
    expect(operations).toEqual([{ pointer: '/systolic/0', value: null }]);
  });

  it('sets a reading aside without losing it, and takes that back', () => {
    const { store, operations } = storeWith({ '/systolic/0': { value: 118, written: '118' } });
    store.change({ pointer: '/systolic/0', rejected: 'movement' });
    expect(store.get('/systolic/0')).toEqual({ value: 118, written: '118', rejected: 'movement' });
    expect(store.entryValues()).toEqual({ '/systolic/0': 118, '/systolic/0!rejected': 'movement' });
    store.change({ pointer: '/systolic/0', rejected: null });
    expect(store.entryValues()).toEqual({ '/systolic/0': 118 });
    expect(operations.map(({ rejected }) => rejected)).toEqual(['movement', null]);
  });

  it('reads a rejection as the server sends it, at an address of its own', () => {
    const { store } = storeWith({
      '/systolic/0!rejected': { value: 'movement' },
      '/systolic/0': { value: 118, written: '118' },
    });
    expect(store.get('/systolic/0')).toEqual({ value: 118, written: '118', rejected: 'movement' });
  });

  it('takes new values from outside and leaves what is being typed', () => {
    const { store } = storeWith({ '/height': { value: 170, written: '170' } });
    store.type('/height', '17');
    store.setValues({ '/height': { value: 171, written: '171' }, '/note': { value: 'seen' } });
    expect(store.get('/height')).toEqual({ value: 171, written: '171', draft: '17' });
    expect(store.get('/note')).toEqual({ value: 'seen' });
    store.setValues({});
    expect(store.get('/note')).toEqual({});
  });

  it('shows nothing of a hidden field', () => {
    const { store } = storeWith();
    store.setValues({ '/height': { value: 170, written: '170' }, '/note': { hidden: true } }, ['/height']);
    expect(store.get('/height')).toEqual({ hidden: true });
    expect(store.get('/note')).toEqual({ hidden: true });
    expect(store.entryValues()).toEqual({});
  });

  it('tells the field that changes, a summary only of committed changes, and no other field', () => {
    const { store } = storeWith();
    const [cell, summary, other] = [vi.fn(), vi.fn(), vi.fn()];
    store.subscribe('/systolic/1', cell);
    store.subscribe('/systolic', summary);
    store.subscribe('/height', other);
    store.type('/systolic/1', '11');
    expect([cell, summary, other].map((listener) => listener.mock.calls.length)).toEqual([1, 0, 0]);
    store.commit('/systolic/1');
    expect(summary).toHaveBeenCalledTimes(1);
    expect(other).not.toHaveBeenCalled();
  });

  it('hands drafts out as they are typed and takes kept ones back', () => {
    const { store, onDraft } = storeWith();
    store.type('/note', 'slight co');
    expect(onDraft).toHaveBeenLastCalledWith({ pointer: '/note', text: 'slight co' });
    store.commit('/note');
    expect(onDraft).toHaveBeenLastCalledWith({ pointer: '/note', text: '' });

    const { store: after, operations } = storeWith();
    after.restoreDrafts({ '/note': 'slight co' });
    expect(after.get('/note')).toEqual({ draft: 'slight co' });
    after.commitAll();
    expect(operations).toEqual([{ pointer: '/note', value: 'slight co' }]);
  });

  it('tells of findings where they appear, change and go away', () => {
    const { store } = storeWith();
    const listener = vi.fn();
    store.subscribe('/height', listener);
    const finding = { checkId: 'a', severity: 'hard' as const, pointers: ['/height'], message: 'too tall' };
    store.setFindings([finding]);
    store.setFindings([finding]);
    expect(listener).toHaveBeenCalledTimes(1);
    expect(store.findingsAt('/height')).toEqual([finding]);
    store.setFindings([]);
    expect(store.findingsAt('/height')).toEqual([]);
    expect(listener).toHaveBeenCalledTimes(2);
  });
});
