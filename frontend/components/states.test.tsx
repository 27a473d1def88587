import { cleanup, render, screen } from '@testing-library/react';
import { afterEach, describe, expect, it } from 'vitest';
import { ApiProblem, OfflineError } from '../lib/api.ts';
import { Loaded } from './states.tsx';

afterEach(cleanup);

const show = (data: string | undefined, error: Error | null) =>
  render(<Loaded query={{ data, error, refetch: () => undefined }}>{(text) => <p>{text}</p>}</Loaded>);

describe('Loaded', () => {
  it('draws the data', () => {
    show('118 mmHg', null);
    expect(screen.getByText('118 mmHg')).toBeTruthy();
  });

  it('keeps what it has when the server goes away, and says so', () => {
    show('118 mmHg', new OfflineError(undefined));
    expect(screen.getByText('118 mmHg')).toBeTruthy();
    expect(screen.getByText(/as last received/)).toBeTruthy();
  });

  it('says nothing of the inside of an unexpected error, only its number', () => {
    show(
      undefined,
      new ApiProblem(500, { title: 'x', detail: 'relation "entry" does not exist', requestId: 'r-17' }),
    );
    expect(screen.queryByText(/relation/)).toBeNull();
    expect(screen.getByText(/r-17/)).toBeTruthy();
  });

  it('says that there is nothing here for what is not there or not yours', () => {
    show(
      undefined,
      new ApiProblem(404, { title: 'x', detail: 'This visit does not exist, or is not yours to see.' }),
    );
    expect(screen.getByText('There is nothing here')).toBeTruthy();
  });
});
