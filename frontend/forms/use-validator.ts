import { useEffect, useState } from 'react';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import { loadValidator, withoutValidator, type FormValidator } from './load-validator.ts';

interface Loaded {
  url: string;
  validator?: FormValidator;
  error?: unknown;
}

/** The validator of an instrument version, fetched by the address that the server gives for it. */
export function useValidator(url: string | undefined, schema: InstrumentSchema) {
  const [loaded, setLoaded] = useState<Loaded>();
  const [attempt, setAttempt] = useState(0);

  useEffect(() => {
    if (url === undefined) return;
    let current = true;
    loadValidator(url, schema).then(
      (validator) => current && setLoaded({ url, validator }),
      (error: unknown) => current && setLoaded({ url, error }),
    );
    return () => {
      current = false;
    };
  }, [url, schema, attempt]);

  if (url === undefined) return { validator: withoutValidator, error: undefined, retry: () => undefined };
  const present = loaded?.url === url ? loaded : undefined;
  return {
    validator: present?.validator,
    error: present?.error,
    retry: () => {
      setLoaded(undefined);
      setAttempt((count) => count + 1);
    },
  };
}
