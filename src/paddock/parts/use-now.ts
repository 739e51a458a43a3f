import { useEffect, useState } from 'react';

const EVERY_MS = 15_000;

/** The device's wall clock, renewed often enough for ages in minutes. Never for anything that is measured. */
export function useNow(): number {
  const [now, setNow] = useState(() => Date.now());
  useEffect(() => {
    const timer = setInterval(() => setNow(Date.now()), EVERY_MS);
    return () => clearInterval(timer);
  }, []);
  return now;
}
