import { createServer } from 'node:net';
import type { AddressInfo, Server } from 'node:net';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { freeLoopbackPort, requireFreeAddress } from '../../../server/bootstrap/free-port.mjs';

let occupant: Server;
let takenPort: number;

beforeEach(async () => {
  occupant = createServer();
  await new Promise<void>((resolve) => occupant.listen(0, '127.0.0.1', resolve));
  takenPort = (occupant.address() as AddressInfo).port;
});

afterEach(() => new Promise((resolve) => occupant.close(resolve)));

test('a taken port is reported with the way out', async () => {
  await expect(requireFreeAddress('127.0.0.1', takenPort)).rejects.toThrow(
    `PORT ${takenPort} on 127.0.0.1 is used by another program; end that program or choose another port`,
  );
});

test('an address of some other machine is reported', async () => {
  await expect(requireFreeAddress('192.0.2.1', 3000)).rejects.toThrow(
    "HOST '192.0.2.1' is not an address of this machine",
  );
});

test('the preferred port is kept while it is free, and another is found when it is not', async () => {
  const free = await freeLoopbackPort();
  expect(await freeLoopbackPort(free)).toBe(free);
  expect(await freeLoopbackPort(takenPort)).not.toBe(takenPort);
});
