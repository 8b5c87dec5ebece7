import { Turnstile } from './turnstile.js';

test('lets so many through at a time, in their order, also past one that fails', async () => {
  const turnstile = new Turnstile(2);
  const order: string[] = [];
  let inside = 0;
  let most = 0;
  const work = (name: string, fails = false) =>
    turnstile.pass(async () => {
      most = Math.max(most, ++inside);
      order.push(name);
      await new Promise((resolve) => setTimeout(resolve, 5));
      inside--;
      if (fails) throw new Error(name);
      return name;
    });
  const all = await Promise.allSettled([work('a'), work('b', true), work('c'), work('d', true), work('e')]);
  expect(all.map((each) => (each.status === 'fulfilled' ? each.value : String(each.reason)))).toEqual([
    'a',
    'Error: b',
    'c',
    'Error: d',
    'e',
  ]);
  expect(order).toEqual(['a', 'b', 'c', 'd', 'e']);
  expect([most, inside]).toEqual([2, 0]);
});
