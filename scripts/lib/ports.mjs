/** Free ports on this machine. */
import { createServer } from 'node:net';

/** Whether a server could listen there now. */
export function isPortFree(host, port) {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once('error', () => resolve(false));
    probe.listen({ host, port, exclusive: true }, () => probe.close(() => resolve(true)));
  });
}

/** A port nobody listens on, chosen by the system. */
export function freePort(host = '127.0.0.1') {
  return new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', reject);
    probe.listen({ host, port: 0, exclusive: true }, () => {
      const { port } = probe.address();
      probe.close(() => resolve(port));
    });
  });
}

/** The first free port of `from`, `from + 1`, … within twenty, or undefined. */
export async function nextFreePort(host, from) {
  for (let port = from; port < from + 20; port += 1) {
    if (await isPortFree(host, port)) return port;
  }
  return undefined;
}
