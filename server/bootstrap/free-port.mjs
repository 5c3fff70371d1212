import { createServer } from 'node:net';
import { SetupProblem } from './setup-problem.mjs';

/**
 * A TCP port on loopback that nobody listens on: `preferred` when it is free, else one that the system picks.
 * @param {number | null} [preferred]
 * @returns {Promise<number>}
 */
export async function freeLoopbackPort(preferred = null) {
  if (preferred !== null) {
    const { error } = await tryListening('127.0.0.1', preferred);
    if (error === null) return preferred;
  }
  const { port } = await tryListening('127.0.0.1', 0);
  return port;
}

/**
 * Says so when the server could not listen on the address it is to listen on.
 * @param {string} host
 * @param {number} port
 */
export async function requireFreeAddress(host, port) {
  const { error } = await tryListening(host, port);
  if (error === null) return;
  if (error === 'EADDRINUSE') {
    throw new SetupProblem(
      `PORT ${port} on ${host} is used by another program; end that program or choose another port, as in 'PORT=${port === 65_535 ? 3000 : port + 1} npm start'.`,
    );
  }
  if (error === 'EACCES') {
    throw new SetupProblem(`PORT ${port} needs rights that this user lacks; choose one from 1024 to 65535.`);
  }
  throw new SetupProblem(
    `HOST '${host}' is not an address of this machine (${error}); use one that is, such as 127.0.0.1 or 0.0.0.0.`,
  );
}

/**
 * @param {string} host
 * @param {number} port
 * @returns {Promise<{ error: string | null, port: number }>}
 */
function tryListening(host, port) {
  return new Promise((resolve) => {
    const server = createServer();
    server.once('error', (error) => {
      resolve({ error: /** @type {NodeJS.ErrnoException} */ (error).code ?? error.message, port });
    });
    server.listen({ host, port, exclusive: true }, () => {
      const address = server.address();
      const listening = address !== null && typeof address === 'object' ? address.port : port;
      server.close(() => resolve({ error: null, port: listening }));
    });
  });
}
