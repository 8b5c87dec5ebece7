import { useEffect, useState } from 'react';

/** Milliseconds since the epoch, renewed every minute: "2 h ago" must not stand still. */
export function useNow(): number {
  const [now, setNow] = useState(() => Date.now());
  useEffect(() => {
    const timer = setInterval(() => setNow(Date.now()), 60_000);
    return () => clearInterval(timer);
  }, []);
  return now;
}
