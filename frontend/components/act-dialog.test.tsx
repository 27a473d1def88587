import { cleanup, fireEvent, render, screen, waitFor } from '@testing-library/react';
import { afterEach, describe, expect, it, vi } from 'vitest';
import { ApiProblem } from '../lib/api.ts';
import { ActDialog, type ActAnswers } from './act-dialog.tsx';

afterEach(cleanup);

function open(props: Partial<Parameters<typeof ActDialog>[0]> = {}) {
  const onAct = vi.fn<(answers: ActAnswers) => Promise<unknown>>(() => Promise.resolve());
  const onClose = vi.fn();
  render(
    <ActDialog
      title="Lock the study"
      consequences={<p>Nobody can change a value until it is unlocked.</p>}
      act="Lock SCREEPATH"
      onAct={onAct}
      onClose={onClose}
      {...props}
    />,
  );
  return { onAct: (props.onAct as typeof onAct | undefined) ?? onAct, onClose };
}

const act = () => fireEvent.click(screen.getByRole('button', { name: 'Lock SCREEPATH' }));

describe('ActDialog', () => {
  it('shows what will happen and names the act, not "OK"', () => {
    open();
    expect(screen.getByRole('dialog', { name: 'Lock the study' })).toBeTruthy();
    expect(screen.getByText('Nobody can change a value until it is unlocked.')).toBeTruthy();
    expect(screen.getByRole('button', { name: 'Leave it as it is' })).toBeTruthy();
  });

  it('does nothing without a reason of more than a character', () => {
    const { onAct } = open();
    act();
    fireEvent.change(screen.getByLabelText(/Reason/), { target: { value: ' x ' } });
    act();
    expect(onAct).not.toHaveBeenCalled();
    expect(screen.getByText('Give a reason that a reader will understand later.')).toBeTruthy();
  });

  it('gives a listed reason with the words added to it', async () => {
    const { onAct, onClose } = open({ reasons: ['All queries settled'] });
    fireEvent.click(screen.getByLabelText('All queries settled'));
    fireEvent.change(screen.getByLabelText(/Add to the reason/), { target: { value: 'on 2026-04-02' } });
    act();
    await waitFor(() => expect(onClose).toHaveBeenCalled());
    expect(onAct).toHaveBeenCalledWith({ reason: 'All queries settled: on 2026-04-02' });
  });

  it('wants words of one’s own where "in own words" is chosen', async () => {
    const { onAct } = open({ reasons: ['All queries settled'] });
    fireEvent.click(screen.getByLabelText('In own words'));
    act();
    expect(onAct).not.toHaveBeenCalled();
    fireEvent.change(screen.getByLabelText(/Reason in own words/), { target: { value: 'Board decision' } });
    act();
    await waitFor(() => expect(onAct).toHaveBeenCalledWith({ reason: 'Board decision' }));
  });

  it('asks a signature for the password', async () => {
    const { onAct } = open({ reasons: false, password: true });
    act();
    expect(screen.getByText('A signature needs your password again.')).toBeTruthy();
    fireEvent.change(screen.getByLabelText(/Your password/), { target: { value: 'secret' } });
    act();
    await waitFor(() => expect(onAct).toHaveBeenCalledWith({ reason: '', password: 'secret' }));
  });

  it('keeps everything typed when it is refused, and says why at the field', async () => {
    const onAct = vi.fn(() =>
      Promise.reject(
        new ApiProblem(403, {
          title: 'The password is not right',
          errors: [{ pointer: '/password', detail: 'Type the password you sign in with.' }],
        }),
      ),
    );
    const { onClose } = open({ password: true, onAct });
    fireEvent.change(screen.getByLabelText(/Reason/), { target: { value: 'Board decision' } });
    fireEvent.change(screen.getByLabelText(/Your password/), { target: { value: 'wrong' } });
    act();
    const alert = await screen.findByRole('alert');
    expect(alert.textContent).toContain('The password is not right');
    expect(document.activeElement).toBe(alert);
    expect(screen.getByLabelText(/Reason/)).toHaveProperty('value', 'Board decision');
    expect(onClose).not.toHaveBeenCalled();
  });
});
