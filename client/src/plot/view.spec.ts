import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ViewStore } from './view.js';

const whole = { fromNm: 400, toNm: 700 };
const at = (fromNm: number, toNm: number) => ({ fromNm, toNm });

describe('the view', () => {
  it('never leaves the spectrum and never shrinks to nothing', () => {
    const end = fc.double({ min: -1e4, max: 1e4 });
    fc.assert(
      fc.property(end, end, (a, b) => {
        const view = new ViewStore(whole);
        view.show(at(a, b));
        const { fromNm, toNm } = view.get();
        expect(fromNm).toBeGreaterThanOrEqual(400);
        expect(toNm).toBeLessThanOrEqual(700);
        expect(toNm - fromNm).toBeGreaterThanOrEqual((300 / 20_000) * (1 - 1e-9));
      }),
    );
  });

  it('keeps the wavelength under the pointer in its place while zooming', () => {
    const view = new ViewStore(whole, at(500, 600));
    expect(view.zoomed(0.5, 525)).toEqual(at(512.5, 562.5));
  });

  it('stops at the ends without changing its length', () => {
    const view = new ViewStore(whole, at(650, 690));
    expect(view.shifted(1)).toEqual(at(660, 700));
    expect(view.shifted(-Infinity)).toEqual(at(400, 440));
  });

  it('goes back and forward through at least fifty views', () => {
    const view = new ViewStore(whole);
    for (let i = 1; i <= 60; i++) view.show(at(400 + i, 500 + i));
    for (let i = 0; i < 60; i++) view.back();
    expect(view.get()).toEqual(whole);
    expect(view.canGoBack).toBe(false);
    view.forward();
    expect(view.get()).toEqual(at(401, 501));
  });

  it('takes one gesture as one step', () => {
    let now = 0;
    const view = new ViewStore(whole, at(500, 600), 0.01, () => now);
    for (let i = 0; i < 30; i++) {
      now += 16;
      view.move(view.shifted(0.01));
    }
    now += 2000;
    view.move(view.shifted(-0.5));
    view.back();
    expect(view.get().fromNm).toBeCloseTo(530, 6);
    view.back();
    expect(view.get()).toEqual(at(500, 600));
  });

  it('moves to a line out of sight and leaves one in sight where it is', () => {
    const view = new ViewStore(whole, at(500, 510));
    view.reveal(505);
    expect(view.get()).toEqual(at(500, 510));
    view.reveal(600);
    expect(view.get()).toEqual(at(595, 605));
  });
});
