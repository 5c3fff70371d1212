import ipaddr from 'ipaddr.js';
import { associationPath, landingOf } from '../network/association-path.ts';
import type { Association, DesignFacts, End, Network } from '../network/network.ts';
import { ends, otherEnd } from '../network/network.ts';
import { defineRule, type Fault } from './define-rule.ts';
import { associationPlaces } from './places.ts';

const messages = {
  address: {
    words: 'identity may change',
    sentence: (v: { readonly place: string; readonly identity: string; readonly because: string }) =>
      `${v.place} identifies itself by ${v.identity}, ${v.because}`,
  },
  unnamed: {
    words: 'identity not stated',
    sentence: (v: { readonly place: string }) => `${v.place} has a changing address and no identity`,
    why: 'An end whose address changes can’t be told by it. An end that answers whoever holds the key can’t tell who is there.',
    seen: 'The association fails after the first change of address, or any holder of the key gets in.',
  },
};

/** A name that the end may use instead: of the device, in the domain that other ends of the design have. */
const nameFor = (design: DesignFacts, association: Association, end: End): string => {
  const device = design.devices[association[end].device]!.name.trim().toLowerCase();
  const [, ...domain] = (association[otherEnd(end)].identity ?? '').split('.');
  const isName = domain.length > 0 && !ipaddr.isValid(association[otherEnd(end)].identity!);
  const host = device.replaceAll(/[^a-z0-9-]+/g, '-');
  return (isName ? [host, ...domain].join('.') : host).slice(0, 80);
};

const faultAt = (network: Network, id: string, end: End): Fault<typeof messages>[] => {
  const { design } = network;
  const association = design.associations[id]!;
  const path = associationPath(network, id);
  if (!path.ok) return [];
  const landing = end === 'a' ? path.landingA : path.landingB;
  const { dynamic, nat } = landingOf(network, landing);
  if (dynamic !== true && nat === undefined) return [];
  const { identity, authentication } = association[end];
  const place = associationPlaces(design, association)[end];
  const ref = { collection: 'associations', id } as const;
  const body = {
    elements: [ref, { collection: 'links' as const, id: landing }],
    identity: [id, end],
    properties: [{ ref, path: [end, 'identity'] }],
    basis: [identity ?? '', dynamic === true],
  };
  if (identity !== undefined && ipaddr.isValid(identity))
    return [
      {
        message: 'address',
        values: { place, identity, because: dynamic === true ? 'which changes' : 'which NAT hides' },
        ...body,
      },
    ];
  // A certificate brings its own name along.
  if (identity !== undefined || dynamic !== true || authentication?.method !== 'pre-shared-key') return [];
  return [
    {
      message: 'unnamed',
      values: { place },
      ...body,
      severity: 'advisory',
      severityReason: 'What this end calls itself is not known.',
    },
  ];
};

export const identityFollowsAddress = defineRule({
  id: 'identity-follows-address',
  title: 'Ends without a fixed public address identify themselves by a name',
  severity: 'degrading',
  looksAt: ['associations', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'The other end looks the key up by this identity. An address that changes, or that NAT replaces, is another one the next time.',
  seen: 'The association comes up until the provider assigns a new address; then authentication fails.',
  sources: [{ document: 'RFC 7296', clause: 'section 3.5' }, 'common practice, no source'],
  messages,
  check: (network): readonly Fault<typeof messages>[] =>
    Object.keys(network.design.associations).flatMap((id) =>
      ends.flatMap((end) => faultAt(network, id, end)),
    ),
  fixes: (fault, { design }) => {
    const [id, end] = fault.identity as readonly [string, End];
    const name = nameFor(design, design.associations[id]!, end);
    return [
      {
        id: 'name',
        label: `Use ${name}`,
        sentence: `Lets ${fault.values.place} identify itself as ${name}.`,
        patch: { associations: { [id]: { [end]: { identity: name } } } },
      },
    ];
  },
});
