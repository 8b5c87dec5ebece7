/** Lets so many pieces of work through at a time; the others wait in their order. */
export class Turnstile {
  private inside = 0;
  private readonly waiting: (() => void)[] = [];

  constructor(private readonly most: number) {}

  async pass<T>(work: () => Promise<T>): Promise<T> {
    if (this.inside >= this.most) await new Promise<void>((enter) => this.waiting.push(enter));
    else this.inside++;
    try {
      return await work();
    } finally {
      const next = this.waiting.shift();
      if (next) next();
      else this.inside--;
    }
  }
}
