import { useCallback, useEffect, useRef, useState } from 'react';

/** One polite voice of the page. The same sentence twice is said twice; sentences in quick succession are said as the last. */
export function useAnnouncer(restMs = 250): { message: string; say: (sentence: string) => void } {
  const [message, setMessage] = useState('');
  const timer = useRef<ReturnType<typeof setTimeout> | undefined>(undefined);
  const odd = useRef(false);
  const say = useCallback(
    (sentence: string) => {
      clearTimeout(timer.current);
      timer.current = setTimeout(() => {
        odd.current = !odd.current;
        setMessage(sentence + (odd.current ? '' : '\u200b')); // a repeated text would not be read again
      }, restMs);
    },
    [restMs],
  );
  useEffect(() => () => clearTimeout(timer.current), []);
  return { message, say };
}
