import pg from 'pg';

type Handler = (payload: string) => void;

/**
 * Hears what other connections say with pg_notify, on one connection of its own that is made again whenever it breaks.
 * What is said while it is broken is lost: users of this class must be right without it, only later.
 */
export class Listener {
  private readonly handlers = new Map<string, Set<Handler>>();
  private client: pg.Client | null = null;
  private connecting: Promise<void> | null = null;
  private closed = false;

  constructor(private readonly url: string) {}

  /** Calls `handler` with every payload said on `channel` (a plain name, written into SQL). Resolves once it is being heard. */
  async on(channel: string, handler: Handler): Promise<void> {
    const known = this.handlers.get(channel);
    if (known) known.add(handler);
    else this.handlers.set(channel, new Set([handler]));
    if (this.client) await this.client.query(`listen ${channel}`);
    else await this.connect();
  }

  async close(): Promise<void> {
    this.closed = true;
    await this.connecting;
    await this.client?.end();
    this.client = null;
  }

  private connect(): Promise<void> {
    this.connecting ??= this.attempt().finally(() => (this.connecting = null));
    return this.connecting;
  }

  private async attempt(): Promise<void> {
    for (let wait = 100; !this.closed; wait = Math.min(wait * 2, 5_000)) {
      const client = new pg.Client({ connectionString: this.url, application_name: 'foreveil listener', keepAlive: true });
      client.on('error', () => this.lost(client));
      client.on('end', () => this.lost(client));
      client.on('notification', ({ channel, payload }) => this.handlers.get(channel)?.forEach((handler) => handler(payload ?? '')));
      try {
        await client.connect();
        for (const channel of this.handlers.keys()) await client.query(`listen ${channel}`);
        this.client = client;
        return;
      } catch {
        await client.end().catch(() => undefined);
        await new Promise((resolve) => setTimeout(resolve, wait));
      }
    }
  }

  private lost(client: pg.Client): void {
    if (this.closed || this.client !== client) return;
    this.client = null;
    void this.connect();
  }
}
