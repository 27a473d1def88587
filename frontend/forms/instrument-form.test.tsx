import { customizeValidator } from '@rjsf/validator-ajv8';
import { cleanup, fireEvent, render, screen, within } from '@testing-library/react';
import { Ajv2020 } from 'ajv/dist/2020.js';
import formats from 'ajv-formats';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { quantityNamed } from '#analysis/quantities/registry.ts';
import { sameDimension } from '#analysis/units/convert.ts';
import type { Operation } from '#schemas/api/capture.ts';
import { compilePublished } from '#schemas/instruments/compile-instrument.ts';
import type { CompiledField } from '#schemas/instruments/compiled-instrument.ts';
import type { FieldSchema, InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { libraryInstruments } from '#schemas/instruments/library/index.ts';
import { quantityLibrary } from '#schemas/instruments/quantity-library.ts';
import { setShortcutsEnabled } from '../lib/keyboard/key-map.ts';
import { spokenUnit } from '../lib/format/units.ts';
import { ValidatedForm, type InstrumentFormProps } from './instrument-form.tsx';

const library = quantityLibrary(quantityNamed, sameDimension);
const structure = customizeValidator({ AjvClass: Ajv2020, ajvOptionsOverrides: { strict: false } });
const nothing: InstrumentFormProps['values'] = {};

afterEach(() => {
  cleanup();
  setShortcutsEnabled(true);
});

function show(schema: InstrumentSchema, props: Partial<InstrumentFormProps> = {}) {
  const operations: Operation[] = [];
  const ajv = new Ajv2020({ strict: false, allErrors: true });
  // The package is CommonJS and types its default export as a module.
  (formats as unknown as (target: Ajv2020) => void)(ajv);
  const validate = ajv.compile(schema);
  const compiled = compilePublished(schema, library);
  const onConfirm = vi.fn();
  render(
    <ValidatedForm
      schema={schema}
      compiled={compiled}
      values={nothing}
      onOperation={(operation) => operations.push(operation)}
      onConfirm={onConfirm}
      validator={{ structure, errorsOf: (document) => (validate(document) ? [] : (validate.errors ?? [])) }}
      {...props}
    />,
  );
  return { operations, compiled, onConfirm };
}

const instrument = (
  properties: Record<string, FieldSchema>,
  more: Partial<InstrumentSchema> = {},
): InstrumentSchema => ({
  $schema: 'https://json-schema.org/draft/2020-12/schema',
  instrumentKey: 'trial',
  title: 'Trial',
  type: 'object',
  properties,
  additionalProperties: false,
  ...more,
});
const readings = (title: string, more: Partial<FieldSchema['readings']> = {}): FieldSchema => ({
  type: 'array',
  title,
  unit: 'mm[Hg]',
  items: { type: 'number', minimum: 0, maximum: 300 },
  maxItems: 5,
  readings: { count: 3, minimum: 2, use: 'all', summary: 'mean', replaceRejected: true, ...more },
});

const typeInto = (field: HTMLElement, text: string) => {
  fireEvent.focus(field);
  fireEvent.change(field, { target: { value: text } });
};
const leave = (field: HTMLElement) => fireEvent.blur(field);
const reading = (name: RegExp) => screen.getByRole<HTMLInputElement>('textbox', { name });

/** The control of a field, found as a screen reader finds it: by its label with the spoken unit. */
function controlOf(field: CompiledField): HTMLElement {
  const unit = field.unit ? spokenUnit(field.unit) : '';
  const name = field.label + (unit && `, ${unit}`);
  if (field.readings)
    return document.querySelector<HTMLElement>(
      `[aria-label="${field.label}, reading 1${unit && `, ${unit}`}"]`,
    )!;
  const labels = [...document.querySelectorAll<HTMLElement>('label, legend, span[id$="/label"]')];
  const label = labels.find(({ textContent }) => spoken(textContent, field) === name);
  if (!label) throw new Error(`${field.pointer} has no label that says "${name}"`);
  if (label instanceof HTMLLabelElement) return document.getElementById(label.htmlFor)!;
  return label.closest('fieldset') ?? document.querySelector(`[aria-labelledby="${label.id}"]`)!;
}

/** A label without what only the eye is given, and without "required". */
function spoken(text: string, field: CompiledField): string {
  return text
    .replace(/ · required/, '')
    .replace(/not done\?$/, '')
    .replace(new RegExp(`^(${escaped(field.label)}) [^,]*, `), '$1, ');
}
const escaped = (text: string) => text.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');

// proves AX-01, DE-07
describe.each(libraryInstruments.map(({ title, schema }) => [title, schema] as const))(
  '%s',
  (_title, schema) => {
    it('gives each field that is always asked for a control with its name and unit', () => {
      const { compiled } = show(schema);
      for (const field of compiled.fields.filter(({ conditional }) => !conditional)) {
        expect(controlOf(field), field.pointer).toBeTruthy();
      }
    });

    it('keeps the digits typed into each number', () => {
      const { compiled, operations } = show(schema);
      const numbers = compiled.fields.filter(
        ({ type, derived, conditional, choices }) =>
          type === 'number' && !derived && !conditional && !choices,
      );
      for (const field of numbers) {
        const control = controlOf(field);
        typeInto(control, '1.50');
        leave(control);
        expect(control).toHaveProperty('value', '1.50');
        expect(operations.at(-1)).toMatchObject({ value: 1.5, written: '1.50' });
      }
      expect(operations).toHaveLength(numbers.length);
    });
  },
);

describe('a field', () => {
  const height = instrument({
    height: { type: 'number', title: 'Height', unit: 'cm', minimum: 100, maximum: 250 },
    smoker: { type: 'boolean', title: 'Smoker' },
  });

  it('says what is wrong with a value, in the words of the server, and keeps it', () => {
    const { operations } = show(height);
    const field = screen.getByRole('textbox', { name: /Height/ });
    typeInto(field, '1725');
    leave(field);
    expect(screen.getByText('Height must be at most 250 cm')).toBeTruthy();
    expect(field.getAttribute('aria-invalid')).toBe('true');
    expect(
      document.getElementById(field.getAttribute('aria-describedby')!.split(' ')[1]!)?.textContent,
    ).toContain('at most 250 cm');
    expect(field).toHaveProperty('value', '1725');
    expect(operations).toHaveLength(1);
  });

  it('asks about a decimal comma and takes the answer', () => {
    const { operations } = show(height);
    const field = screen.getByRole('textbox', { name: /Height/ });
    typeInto(field, '172,50');
    leave(field);
    expect(operations).toEqual([]);
    expect(field).toHaveProperty('value', '172,50');
    fireEvent.click(screen.getByRole('button', { name: 'Yes, 172.50' }));
    expect(operations).toEqual([{ pointer: '/height', value: 172.5, written: '172.50' }]);
  });

  it('takes a value on Enter too, and gives the old one back on Escape', () => {
    const { operations } = show(height, { values: { '/height': { value: 170, written: '170' } } });
    const field = screen.getByRole('textbox', { name: /Height/ });
    typeInto(field, '17');
    fireEvent.keyDown(field, { key: 'Escape' });
    expect(field).toHaveProperty('value', '170');
    typeInto(field, '171');
    fireEvent.keyDown(field, { key: 'Enter' });
    expect(operations).toEqual([{ pointer: '/height', value: 171, written: '171' }]);
  });

  it('never shows an unanswered question as "no"', () => {
    const { operations } = show(height);
    const group = screen.getByRole('group', { name: /Smoker/ });
    expect(
      within(group)
        .getAllByRole('radio')
        .map((radio) => (radio as HTMLInputElement).checked),
    ).toEqual([false, false]);
    fireEvent.click(within(group).getByRole('radio', { name: 'No' }));
    expect(operations).toEqual([{ pointer: '/smoker', value: false }]);
  });

  // proves DE-06
  it('can be missing with a reason, which can be taken back', () => {
    const { operations } = show(height);
    fireEvent.click(screen.getByRole('button', { name: 'Height: not done' }));
    fireEvent.change(screen.getByRole('combobox', { name: 'Height: why it was not done' }), {
      target: { value: 'equipment-failure' },
    });
    expect(screen.getByText('Equipment failed')).toBeTruthy();
    fireEvent.click(screen.getByRole('button', { name: 'It was done' }));
    expect(operations).toEqual([
      { pointer: '/height', missing: 'equipment-failure' },
      { pointer: '/height', value: null },
    ]);
    expect(screen.getByRole('textbox', { name: /Height/ })).toHaveProperty('value', '');
  });

  it('stands in its place when it is hidden, and shows nothing', () => {
    show(height, { values: { '/height': { value: 171, written: '171' } }, hiddenPointers: ['/height'] });
    expect(screen.getByText('entered · hidden until unblinding')).toBeTruthy();
    expect(document.body.innerHTML).not.toContain('171');
  });

  it('is only read where the form is only read', () => {
    show(height, { readOnly: true, values: { '/height': { value: 171, written: '171' } } });
    expect(screen.getByRole('textbox', { name: /Height/ })).toHaveProperty('readOnly', true);
    expect(screen.getByRole('radio', { name: 'Yes' })).toHaveProperty('disabled', true);
    expect(screen.queryByRole('button', { name: /not done/ })).toBeNull();
  });

  it('lets a soft check be answered with a reason', () => {
    const finding = {
      checkId: 'tall',
      severity: 'soft' as const,
      pointers: ['/height'],
      message: 'Unusually tall.',
    };
    const findings = [finding];
    const { onConfirm } = show(height, { findings });
    fireEvent.click(screen.getByRole('button', { name: 'Keep it with a reason' }));
    fireEvent.click(screen.getByRole('button', { name: 'Keep' }));
    expect(onConfirm).not.toHaveBeenCalled();
    fireEvent.change(screen.getByLabelText(/Why it is kept/), { target: { value: 'measured twice' } });
    fireEvent.click(screen.getByRole('button', { name: 'Keep' }));
    expect(onConfirm).toHaveBeenCalledWith(finding, 'measured twice');
  });

  it('appears when another one asks for it, and goes again', () => {
    show(
      instrument(
        { arm: { type: 'string', title: 'Arm', enum: ['left', 'neither'] } },
        {
          additionalProperties: undefined as never,
          unevaluatedProperties: false,
          if: { properties: { arm: { const: 'neither' } }, required: ['arm'] },
          then: { properties: { why: { type: 'string', title: 'Why neither' } } },
        },
      ),
    );
    expect(screen.queryByRole('textbox', { name: /Why neither/ })).toBeNull();
    fireEvent.click(screen.getByRole('radio', { name: 'neither' }));
    expect(screen.getByRole('textbox', { name: /Why neither/ })).toBeTruthy();
    fireEvent.click(screen.getByRole('radio', { name: 'left' }));
    expect(screen.queryByRole('textbox', { name: /Why neither/ })).toBeNull();
  });

  it('becomes a value when the page goes away', () => {
    const { operations } = show(height);
    typeInto(screen.getByRole('textbox', { name: /Height/ }), '171');
    fireEvent(window, new Event('pagehide'));
    expect(operations).toEqual([{ pointer: '/height', value: 171, written: '171' }]);
  });
});

describe('a grid of readings', () => {
  const pressures = instrument({
    systolic: readings('Systolic', { together: 'cuff' }),
    diastolic: readings('Diastolic', { together: 'cuff' }),
  });
  const one = instrument({ systolic: readings('Systolic') });

  const paste = (field: HTMLElement, text: string) =>
    fireEvent.paste(field, { clipboardData: { getData: () => text } });

  it('is a table with a head for each field and each reading', () => {
    show(pressures);
    const table = screen.getByRole('table', { name: /Systolic, Diastolic/ });
    expect(
      within(table)
        .getAllByRole('columnheader')
        .map(({ textContent }) => textContent)[1],
    ).toContain('Systolic');
    expect(
      within(table)
        .getAllByRole('rowheader')
        .map(({ textContent }) => textContent),
    ).toEqual(['1', '2', '3', 'so far']);
  });

  it('goes to the next reading on Enter', () => {
    show(pressures);
    const first = reading(/Systolic, reading 1/);
    first.focus();
    typeInto(first, '118');
    fireEvent.keyDown(first, { key: 'Enter' });
    expect(document.activeElement).toBe(reading(/Systolic, reading 2/));
    fireEvent.keyDown(document.activeElement!, { key: 'ArrowRight' });
    expect(document.activeElement).toBe(reading(/Diastolic, reading 2/));
  });

  it('takes a copied column, one operation a reading, digits kept', () => {
    const { operations } = show(one);
    paste(reading(/Systolic, reading 1/), '118.50\n116\n117\n');
    expect(operations).toEqual([
      { pointer: '/systolic/0', value: 118.5, written: '118.50' },
      { pointer: '/systolic/1', value: 116, written: '116' },
      { pointer: '/systolic/2', value: 117, written: '117' },
    ]);
    expect(screen.getByText('117.17')).toBeTruthy();
  });

  it('asks once about all decimal commas of a copied column', () => {
    const { operations } = show(one);
    paste(reading(/Systolic, reading 1/), '118,5\n116,25');
    expect(operations).toEqual([]);
    expect(screen.getByText(/2 readings have a decimal comma: 118,5; 116,25/)).toBeTruthy();
    fireEvent.click(screen.getByRole('button', { name: 'Yes, with a point' }));
    expect(operations.map(({ written }) => written)).toEqual(['118.5', '116.25']);
  });

  it('opens boxes for what was copied, and names what finds no place', () => {
    show(one);
    paste(reading(/Systolic, reading 1/), '1\n2\n3\n4\n5\n6\n7');
    expect(reading(/Systolic, reading 5/).value).toBe('5');
    expect(screen.getByText(/2 pasted values found no place and were not used: 6, 7/)).toBeTruthy();
  });

  it('sets a reading aside on x with a reason of the list; it stays, struck through, and another box opens', () => {
    const { operations } = show(one, { values: { '/systolic/0': { value: 118, written: '118' } } });
    fireEvent.keyDown(reading(/Systolic, reading 1/), { key: 'x' });
    const dialog = screen.getByRole('dialog', { name: 'Set aside: Systolic, reading 1' });
    fireEvent.click(within(dialog).getByRole('button', { name: 'Movement' }));
    expect(operations).toEqual([{ pointer: '/systolic/0', rejected: 'movement' }]);
    expect(reading(/Systolic, reading 1.*set aside: Movement/)).toHaveProperty('readOnly', true);
    expect(reading(/Systolic, reading 4/)).toBeTruthy();
    fireEvent.keyDown(reading(/Systolic, reading 1/), { key: 'x' });
    expect(operations.at(-1)).toEqual({ pointer: '/systolic/0', rejected: null });
  });

  it('sets aside the same reading of all fields that are read in one act', () => {
    show(pressures, { values: { '/systolic/0': { value: 118, written: '118', rejected: 'movement' } } });
    expect(reading(/Diastolic, reading 1.*set aside: Movement/)).toHaveProperty('readOnly', true);
  });

  it('leaves x alone when single keys are off; the button does the same', () => {
    setShortcutsEnabled(false);
    show(one);
    const first = reading(/Systolic, reading 1/);
    fireEvent.focus(first);
    fireEvent.keyDown(first, { key: 'x' });
    expect(screen.queryByRole('dialog')).toBeNull();
    fireEvent.click(screen.getByRole('button', { name: /Set aside: reading 1/ }));
    expect(screen.getByRole('dialog', { name: 'Set aside: Systolic, reading 1' })).toBeTruthy();
  });

  it('says at which reading a value is out of its limits', () => {
    show(one);
    const second = reading(/Systolic, reading 2/);
    typeInto(second, '1180');
    leave(second);
    expect(screen.getByText('Systolic, reading 2 must be at most 300 mmHg')).toBeTruthy();
  });

  it('shows a hidden field in its place, without boxes', () => {
    show(one, { hiddenPointers: ['/systolic'] });
    expect(screen.getByText('entered · hidden until unblinding')).toBeTruthy();
    expect(screen.queryByRole('textbox')).toBeNull();
  });
});
