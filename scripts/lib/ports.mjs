import { createServer } from 'node:net';

/** The port itself when nobody listens there on loopback, else null; 0 asks for any free one. */
export function freePort(port = 0) {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => resolve(null));
    probe.listen({ host: '127.0.0.1', port, exclusive: true }, () => {
      const { port: found } = probe.address();
      probe.close(() => resolve(found));
    });
  });
}

/** The first free port from `from` on. */
export async function nextFreePort(from) {
  for (let port = from; port < from + 100; port++) if (await freePort(port)) return port;
  return freePort();
}
