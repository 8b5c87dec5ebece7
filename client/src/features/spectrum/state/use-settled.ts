import { useEffect, useState } from 'react';
import type { Range, ViewStore } from '../../../plot/view.js';

/** The view once it has rested for a moment: for what is too slow, too talkative or too jumpy to follow every frame. */
export function useSettledView(view: ViewStore, restMs = 150): Range {
  const [settled, setSettled] = useState(view.get);
  useEffect(() => {
    let timer: ReturnType<typeof setTimeout>;
    const follow = () => {
      clearTimeout(timer);
      timer = setTimeout(() => setSettled(view.get()), restMs);
    };
    follow();
    const stop = view.subscribe(follow);
    return () => {
      stop();
      clearTimeout(timer);
    };
  }, [view, restMs]);
  return settled;
}
