import type { Pools } from '#contract/numbering.ts';
import { noPools } from '#contract/numbering.ts';

/** Where the demo's team takes its numbers from. */
export const demoPools: Pools = {
  ...noPools,
  vnis: [{ from: 10_100, to: 10_999, for: 'Saltmarsh Ferries' }],
  vlans: [{ from: 110, to: 899 }],
  loopbacks: [{ prefix: '10.255.0.0/16', for: 'Loopback endpoints' }],
  reserved: {
    vnis: [{ from: 10_900, to: 10_999, for: 'Trials on the bench' }],
    vlans: [{ from: 800, to: 899, for: 'Guests of the port authority' }],
    networks: [{ prefix: '10.255.200.0/24', for: 'Routers of the ring' }],
  },
  networksInUse: [{ prefix: '10.20.0.0/16', for: 'Offices' }],
};
