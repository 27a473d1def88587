import { useEffect, useState } from 'react';

/** The value after it has stood still for a while: what is asked of the server while someone types. */
export function useSettled<T>(value: T, milliseconds = 500): T {
  const [settled, setSettled] = useState(value);
  useEffect(() => {
    const timer = setTimeout(() => setSettled(value), milliseconds);
    return () => clearTimeout(timer);
  }, [value, milliseconds]);
  return settled;
}
