import type { Entry } from '../model/design.ts';
import type { DesignFacts } from '../network/network.ts';

/** What two ends are called in a sentence. */
export interface Places {
  readonly a: string;
  readonly b: string;
}

/** Name of the site at which a device stands. */
export const siteNameOf = (design: DesignFacts, device: string): string =>
  design.sites[design.devices[device]!.site]!.name;

/** The sites of two devices by name; the devices' own names where both stand at one site. */
export const placesOf = (design: DesignFacts, deviceA: string, deviceB: string): Places => {
  const a = siteNameOf(design, deviceA);
  const b = siteNameOf(design, deviceB);
  return a === b ? { a: design.devices[deviceA]!.name, b: design.devices[deviceB]!.name } : { a, b };
};

/** The devices at both ends of a tunnel. */
export const tunnelDevices = (design: DesignFacts, tunnel: Entry<'tunnels'>): Places => ({
  a: design.endpoints[tunnel.a.endpoint]!.device,
  b: design.endpoints[tunnel.b.endpoint]!.device,
});

export const tunnelPlaces = (design: DesignFacts, tunnel: Entry<'tunnels'>): Places => {
  const { a, b } = tunnelDevices(design, tunnel);
  return placesOf(design, a, b);
};

export const associationPlaces = (design: DesignFacts, association: Entry<'associations'>): Places =>
  placesOf(design, association.a.device, association.b.device);
