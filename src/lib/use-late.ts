import { useEffect, useState } from 'react';

/** True once `active` has lasted `delayMs`, so that quick answers never flash a loading state. */
export function useLate(active: boolean, delayMs = 200): boolean {
  const [late, setLate] = useState(false);
  useEffect(() => {
    if (!active) return;
    const timer = setTimeout(() => setLate(true), delayMs);
    return () => {
      clearTimeout(timer);
      setLate(false);
    };
  }, [active, delayMs]);
  return active && late;
}
