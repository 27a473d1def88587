import { cleanup, render, screen } from '@testing-library/react';
import { afterEach, describe, expect, it } from 'vitest';
import { CheckboxField, RadioField, SelectField, TextareaField, TextField } from './fields.tsx';

afterEach(cleanup);

const described = (element: HTMLElement) =>
  (element.getAttribute('aria-describedby') ?? '')
    .split(' ')
    .map((id) => document.getElementById(id)?.textContent)
    .join(' ');

// proves AX-01
describe('fields', () => {
  it('are named by label and spoken unit; the short unit is for the eye alone', () => {
    render(<TextField label="Systolic pressure" unit="mm[Hg]" />);
    const label = document.querySelector('label')!;
    expect(label.textContent).toBe('Systolic pressure mmHg, millimetres of mercury');
    expect(label.querySelector('[aria-hidden]')?.textContent).toBe(' mmHg');
    expect(screen.getByLabelText(/Systolic pressure/)).toBeInstanceOf(HTMLInputElement);
  });

  it('carry help and error, and say that they are wrong', () => {
    render(<TextField label="Code" help="As on the sheet." error="Give the code." />);
    const field = screen.getByLabelText('Code');
    expect(described(field)).toBe('As on the sheet. ▲Give the code.');
    expect(field.getAttribute('aria-invalid')).toBe('true');
  });

  it('say in words that they are required', () => {
    render(<TextareaField label="Reason" required />);
    expect(screen.getByLabelText(/Reason · required/)).toHaveProperty('required', true);
  });

  it('offer choices with a first line that is none', () => {
    render(<SelectField label="Arm" placeholder="choose…" choices={[{ value: 'left', label: 'Left' }]} />);
    expect([...document.querySelectorAll('option')].map(({ value }) => value)).toEqual(['', 'left']);
  });

  it('group radios under one name', () => {
    render(
      <RadioField
        name="arm"
        label="Arm"
        choices={[{ value: 'l', label: 'Left' }]}
        defaultValue="l"
        error="No."
      />,
    );
    const group = screen.getByRole('group', { name: 'Arm' });
    expect(described(group)).toBe('▲No.');
    expect(screen.getByRole('radio', { name: 'Left' })).toHaveProperty('checked', true);
  });

  it('tie a box to its words', () => {
    render(<CheckboxField label="I understand" help="It binds." />);
    expect(described(screen.getByRole('checkbox', { name: 'I understand' }))).toBe('It binds.');
  });
});
