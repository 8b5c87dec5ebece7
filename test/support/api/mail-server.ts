import { once } from 'node:events';
import type { AddressInfo } from 'node:net';
import PostalMime, { type Email } from 'postal-mime';
import { SMTPServer } from 'smtp-server';

/** What a mail server does with a message that it has read to its end. */
export type Answer = 'take' | 'refuse' | 'later' | 'take and hang up' | 'take and say nothing';

export interface MailServer {
  readonly port: number;
  /** every message that was read to its end, whatever the answer */
  readonly received: { readonly to: string[]; readonly raw: string; readonly email: Email }[];
  close(): Promise<void>;
}

const CODES = { refuse: 550, later: 451 } as const;

/** A real SMTP server in this process. @param port 0: any @param answer to each message in turn */
export async function startMailServer(port = 0, answer: (n: number) => Answer = () => 'take'): Promise<MailServer> {
  const received: MailServer['received'] = [];
  let messages = 0;
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onData(stream, session, done) {
      const pieces: Buffer[] = [];
      stream.on('data', (piece: Buffer) => pieces.push(piece));
      stream.on('end', () => void finish(Buffer.concat(pieces)));
      async function finish(raw: Buffer): Promise<void> {
        const does = answer(messages++);
        received.push({
          to: session.envelope.rcptTo.map(({ address }) => address),
          raw: raw.toString(),
          email: await PostalMime.parse(raw),
        });
        if (does === 'take') return done();
        if (does === 'refuse' || does === 'later') return done(Object.assign(new Error('not today'), { responseCode: CODES[does] }));
        if (does === 'take and hang up') server.connections.forEach((connection) => (connection as { close(): void }).close());
      }
    },
  });
  server.on('error', () => undefined); // a client that goes away is part of some tests
  server.listen(port, '127.0.0.1');
  await once(server.server, 'listening');
  const close = () =>
    new Promise<void>((resolve) => {
      server.connections.forEach((connection) => (connection as { close(): void }).close());
      server.close(() => resolve());
    });
  return { port: (server.server.address() as AddressInfo).port, received, close };
}
