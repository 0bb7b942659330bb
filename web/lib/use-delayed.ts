import { useEffect, useState } from 'react';

/** True once `waiting` has lasted for the delay: a skeleton that flashes is worse than none. */
export function useDelayed(waiting: boolean, delayMs = 300): boolean {
  const [late, setLate] = useState(false);
  useEffect(() => {
    if (!waiting) return;
    const timer = setTimeout(() => setLate(true), delayMs);
    return () => {
      clearTimeout(timer);
      setLate(false);
    };
  }, [waiting, delayMs]);
  return waiting && late;
}
