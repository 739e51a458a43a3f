import { createServer } from 'node:net';

/** @param {number} port @returns {Promise<number | null>} the port on loopback where it is free; 0 asks for any */
export function freePort(port) {
  return new Promise((resolve) => {
    const server = createServer();
    server.on('error', () => resolve(null));
    server.listen(port, '127.0.0.1', () => {
      const address = server.address();
      server.close(() => resolve(typeof address === 'object' && address !== null ? address.port : null));
    });
  });
}
