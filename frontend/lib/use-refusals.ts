import { useState } from 'react';
import { ApiProblem } from './api.ts';

/** Runs an act of a dialog and keeps what the server says about single fields, by pointer. */
export function useRefusals(): [Readonly<Record<string, string>>, <T>(act: () => Promise<T>) => Promise<T>] {
  const [refused, setRefused] = useState<Record<string, string>>({});
  const run = async <T>(act: () => Promise<T>): Promise<T> => {
    setRefused({});
    try {
      return await act();
    } catch (error) {
      if (error instanceof ApiProblem) {
        setRefused(Object.fromEntries(error.errors.map(({ pointer, detail }) => [pointer, detail])));
      }
      throw error;
    }
  };
  return [refused, run];
}
