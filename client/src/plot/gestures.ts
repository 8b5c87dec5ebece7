import type { ViewStore } from './view.js';

const WHEEL_STEP = 1.0015; // zoom factor per wheel pixel
const CLICK_PX = 4;

/** Wavelength under a client x. */
function nmAt(over: HTMLElement, view: ViewStore, clientX: number): number {
  const box = over.getBoundingClientRect();
  const { fromNm, toNm } = view.get();
  return fromNm + ((clientX - box.left) / box.width) * (toNm - fromNm);
}

function onWheel(over: HTMLElement, view: ViewStore) {
  return (event: WheelEvent) => {
    event.preventDefault();
    if (Math.abs(event.deltaX) > Math.abs(event.deltaY) || event.shiftKey) {
      view.move(view.shifted((event.deltaX || event.deltaY) / over.clientWidth));
      return;
    }
    view.move(view.zoomed(WHEEL_STEP ** event.deltaY, nmAt(over, view, event.clientX)));
  };
}

/** Shift-drag and middle drag pan; uPlot's own drag, which selects a stretch to zoom into, must not see them. */
function panStart(over: HTMLElement, view: ViewStore) {
  return (event: MouseEvent) => {
    if (event.button !== 1 && !(event.button === 0 && event.shiftKey)) return;
    event.preventDefault();
    event.stopImmediatePropagation();
    let lastX = event.clientX;
    const drag = (move: MouseEvent) => {
      view.move(view.shifted((lastX - move.clientX) / over.clientWidth));
      lastX = move.clientX;
    };
    const end = () => {
      document.removeEventListener('mousemove', drag);
      document.removeEventListener('mouseup', end);
    };
    document.addEventListener('mousemove', drag);
    document.addEventListener('mouseup', end);
  };
}

/** Two fingers pinch and pan; one finger scrolls the page and taps. */
function touches(over: HTMLElement, view: ViewStore) {
  let last: { middle: number; span: number } | null = null;
  const measure = (event: TouchEvent) => {
    const [a, b] = [event.touches[0]!.clientX, event.touches[1]!.clientX];
    return { middle: (a + b) / 2, span: Math.max(20, Math.abs(a - b)) };
  };
  return {
    start: (event: TouchEvent) => void (last = event.touches.length === 2 ? measure(event) : null),
    move: (event: TouchEvent) => {
      if (event.touches.length !== 2 || !last) return;
      event.preventDefault();
      const now = measure(event);
      const zoomed = view.zoomed(last.span / now.span, nmAt(over, view, last.middle));
      const by = ((last.middle - now.middle) / over.clientWidth) * (zoomed.toNm - zoomed.fromNm);
      view.move({ fromNm: zoomed.fromNm + by, toNm: zoomed.toNm + by });
      last = now;
    },
    end: () => void (last = null),
  };
}

/**
 * Wheel, pan, pinch and click on the plot area of a curve.
 * @param onPick told the wavelength of a click that was no drag
 * @returns how to undo it
 */
export function attachGestures(over: HTMLElement, view: ViewStore, onPick: (nm: number) => void): () => void {
  const off = new AbortController();
  const { signal } = off;
  const touch = touches(over, view);
  let downX = NaN;
  over.style.touchAction = 'pan-y';
  over.addEventListener('wheel', onWheel(over, view), { passive: false, signal });
  over.addEventListener('mousedown', panStart(over, view), { capture: true, signal });
  over.addEventListener('pointerdown', (event) => void (downX = event.button === 0 && !event.shiftKey ? event.clientX : NaN), { signal });
  over.addEventListener('click', (event) => void (Math.abs(event.clientX - downX) <= CLICK_PX && onPick(nmAt(over, view, event.clientX))), {
    signal,
  });
  over.addEventListener('touchstart', touch.start, { passive: true, signal });
  over.addEventListener('touchmove', touch.move, { passive: false, signal });
  over.addEventListener('touchend', touch.end, { signal });
  return () => off.abort();
}
