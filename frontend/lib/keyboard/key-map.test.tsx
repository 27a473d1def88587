import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import {
  bindShortcut,
  keysOf,
  knownShortcuts,
  listenForShortcuts,
  remapShortcut,
  setShortcutsEnabled,
} from './key-map.ts';

const verify = { id: 'verify', keys: 'v', label: 'Verify', group: 'Desk' };
const toQueries = { id: 'go-queries', keys: 'g q', label: 'Go to queries', group: 'Go' };
let stop: () => void;

const press = (key: string, target: Element = document.body, more: KeyboardEventInit = {}) =>
  target.dispatchEvent(
    new KeyboardEvent('keydown', { key, bubbles: true, composed: true, cancelable: true, ...more }),
  );

beforeEach(() => {
  stop = listenForShortcuts(document);
});
afterEach(() => {
  stop();
  setShortcutsEnabled(true);
  remapShortcut('verify', undefined);
  document.body.replaceChildren();
});

// proves AX-03
describe('shortcuts', () => {
  it('act while they are bound, and no longer', () => {
    const act = vi.fn();
    const unbind = bindShortcut({ ...verify, perform: act });
    press('v');
    unbind();
    press('v');
    expect(act).toHaveBeenCalledTimes(1);
  });

  it('never act while a field has the focus', () => {
    const act = vi.fn();
    const unbind = bindShortcut({ ...verify, perform: act });
    for (const name of ['input', 'textarea', 'select']) {
      const field = document.body.appendChild(document.createElement(name));
      press('v', field);
    }
    expect(act).not.toHaveBeenCalled();
    const box = document.body.appendChild(
      Object.assign(document.createElement('input'), { type: 'checkbox' }),
    );
    press('v', box);
    expect(act).toHaveBeenCalledTimes(1);
    unbind();
  });

  it('never act with a modifier held, or behind an open dialog', () => {
    const act = vi.fn();
    const unbind = bindShortcut({ ...verify, perform: act });
    press('v', document.body, { ctrlKey: true });
    press('v', document.body, { metaKey: true });
    const dialog = document.body.appendChild(document.createElement('dialog'));
    dialog.setAttribute('open', '');
    press('v');
    expect(act).not.toHaveBeenCalled();
    unbind();
  });

  it('take two keys one after the other, not one of them alone', () => {
    const act = vi.fn();
    const unbind = bindShortcut({ ...toQueries, perform: act });
    press('q');
    expect(act).not.toHaveBeenCalled();
    press('g');
    press('q');
    expect(act).toHaveBeenCalledTimes(1);
    unbind();
  });

  it('can be switched off', () => {
    const act = vi.fn();
    const unbind = bindShortcut({ ...verify, perform: act });
    setShortcutsEnabled(false);
    press('v');
    expect(act).not.toHaveBeenCalled();
    unbind();
  });

  it('can be put on another key and given back', () => {
    const act = vi.fn();
    const unbind = bindShortcut({ ...verify, perform: act });
    remapShortcut('verify', 'k');
    press('v');
    expect(act).not.toHaveBeenCalled();
    press('k');
    expect(act).toHaveBeenCalledTimes(1);
    expect(keysOf(verify)).toBe('k');
    remapShortcut('verify', undefined);
    expect(keysOf(verify)).toBe('v');
    unbind();
  });

  it('are remembered once met, for the account page', () => {
    bindShortcut({ ...verify, perform: () => undefined })();
    expect(knownShortcuts()).toContainEqual(verify);
  });
});
