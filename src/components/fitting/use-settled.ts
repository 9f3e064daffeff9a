import { useEffect, useState } from 'react';

/** The value once it has not changed for `ms` milliseconds, so that a drag asks the server once and not at every graduation. */
export function useSettled<Value>(value: Value, ms: number): Value {
  const [settled, setSettled] = useState(value);
  const key = JSON.stringify(value);
  const [settledKey, setSettledKey] = useState(key);
  useEffect(() => {
    if (key === settledKey) return undefined;
    const timer = setTimeout(() => {
      setSettled(value);
      setSettledKey(key);
    }, ms);
    return () => {
      clearTimeout(timer);
    };
  }, [key, settledKey, ms, value]);
  return settled;
}
