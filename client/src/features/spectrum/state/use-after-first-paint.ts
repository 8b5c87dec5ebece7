import { startTransition, useEffect, useState } from 'react';

/** True from the second render on: what is large and below is drawn after the curve, without holding it up. */
export function useAfterFirstPaint(): boolean {
  const [later, setLater] = useState(false);
  useEffect(() => startTransition(() => setLater(true)), []);
  return later;
}
