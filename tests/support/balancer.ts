import type { AddressInfo } from 'node:net';
import { connect, createServer } from 'node:net';
import { once } from 'node:events';

/** One address before several servers, as a balancer is: each connection goes to the next server that takes it. */
export interface Balancer {
  readonly url: string;
  /** How many connections each server got. */
  readonly taken: ReadonlyMap<string, number>;
  close(): Promise<void>;
}

export async function startBalancer(urls: readonly string[]): Promise<Balancer> {
  const taken = new Map(urls.map((url) => [url, 0]));
  let turn = 0;
  const balancer = createServer((client) => {
    client.on('error', () => client.destroy());
    const tryNext = (left: number): void => {
      if (left === 0) return void client.destroy();
      const url = urls[turn++ % urls.length]!;
      const server = connect(Number(new URL(url).port), '127.0.0.1');
      server.once('connect', () => {
        taken.set(url, (taken.get(url) ?? 0) + 1);
        server.removeAllListeners('error');
        server.on('error', () => client.destroy());
        server.on('close', () => client.destroy());
        client.on('close', () => server.destroy());
        client.pipe(server).pipe(client);
      });
      server.once('error', () => tryNext(left - 1));
    };
    tryNext(urls.length);
  });
  balancer.listen(0, '127.0.0.1');
  await once(balancer, 'listening');
  return {
    url: `http://127.0.0.1:${(balancer.address() as AddressInfo).port}`,
    taken,
    close: async () => {
      balancer.close();
      await once(balancer, 'close');
    },
  };
}
