import { createServer } from 'node:net';

/**
 * @param {number} port 0 asks for any.
 * @param {string} host
 * @returns {Promise<number | null>} the port, or null where somebody listens on it.
 * @throws {Error} where the address can't be listened on for another reason.
 */
export function tryPort(port, host = '127.0.0.1') {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.once('error', (/** @type {NodeJS.ErrnoException} */ error) =>
      error.code === 'EADDRINUSE' ? resolve(null) : reject(error),
    );
    server.listen({ port, host, exclusive: true }, () => {
      const address = server.address();
      server.close(() => resolve(typeof address === 'object' && address ? address.port : port));
    });
  });
}

/**
 * A port on loopback that nobody uses.
 * @returns {Promise<number>}
 */
export async function freePort() {
  const port = await tryPort(0);
  if (port === null) throw new Error('No port is free on 127.0.0.1.');
  return port;
}

/**
 * @param {string} host as listened on.
 * @param {number} port
 * @returns the address that a browser on this machine uses.
 */
export function addressOf(host, port) {
  return `http://${host.includes(':') ? `[${host}]` : host}:${port}`;
}
