import type { Design } from '#engine/model/design.ts';

type Association = Design['associations'][string];
type AssociationEnd = Association['a'];
type Proposal = NonNullable<AssociationEnd['ikeProposals']>[string];
type EspProposal = NonNullable<AssociationEnd['espProposals']>[string];

// Names of algorithms as the daemon's manual spells them; from memory.
const encryptions: Readonly<Record<Proposal['encryption'], (bits: number | undefined) => string>> = {
  'aes-gcm-16': (bits) => `aes${bits}gcm16`,
  'aes-gcm-12': (bits) => `aes${bits}gcm12`,
  'aes-gcm-8': (bits) => `aes${bits}gcm8`,
  'chacha20-poly1305': () => 'chacha20poly1305',
  'aes-cbc': (bits) => `aes${bits}`,
  'aes-ctr': (bits) => `aes${bits}ctr`,
  null: () => 'null',
  '3des-cbc': () => '3des',
  'des-cbc': () => 'des',
};
const integrities: Readonly<Record<NonNullable<Proposal['integrity']>, string>> = {
  'hmac-md5-96': 'md5',
  'hmac-sha1-96': 'sha1',
  'hmac-sha2-256-128': 'sha256',
  'hmac-sha2-384-192': 'sha384',
  'hmac-sha2-512-256': 'sha512',
};
const prfs: Readonly<Record<NonNullable<Proposal['prf']>, string>> = {
  'hmac-md5': 'prfmd5',
  'hmac-sha1': 'prfsha1',
  'hmac-sha2-256': 'prfsha256',
  'hmac-sha2-384': 'prfsha384',
  'hmac-sha2-512': 'prfsha512',
};
const groups: Readonly<Record<number, string>> = {
  14: 'modp2048',
  15: 'modp3072',
  19: 'ecp256',
  20: 'ecp384',
  31: 'curve25519',
};

const groupName = (group: number): string => {
  const name = groups[group];
  if (name === undefined) throw new Error(`group ${group}: the lab has no name for it`);
  return name;
};

const inOrder = <T extends { readonly rank: string }>(
  map: Readonly<Record<string, T>> | undefined,
): readonly T[] => Object.values(map ?? {}).sort((x, y) => (x.rank < y.rank ? -1 : 1));

const proposalWords = (proposal: Proposal | EspProposal): readonly string[] => [
  encryptions[proposal.encryption](proposal.keyBits),
  ...(proposal.integrity === undefined ? [] : [integrities[proposal.integrity]]),
  ...('prf' in proposal && proposal.prf !== undefined ? [prfs[proposal.prf]] : []),
  ...(proposal.group === undefined ? [] : [groupName(proposal.group)]),
];

const proposals = (map: AssociationEnd['ikeProposals'] | AssociationEnd['espProposals']): string =>
  inOrder<Proposal | EspProposal>(map)
    .map((proposal) => proposalWords(proposal).join('-'))
    .join(', ');

/** A group beside an ESP proposal asks for a key exchange of its own when child keys are renewed. */
const espProposals = ({ espProposals: map, perfectForwardSecrecy }: AssociationEnd): string =>
  proposals(
    perfectForwardSecrecy === false
      ? Object.fromEntries(
          Object.entries(map ?? {}).map(([id, { group: _group, ...proposal }]) => [id, proposal]),
        )
      : map,
  );

const startActions = { starts: 'start', answers: 'none', 'on-traffic': 'trap' } as const;

const landingOf = (design: Design, end: AssociationEnd) => {
  const [via] = inOrder(end.via);
  const link = via === undefined ? undefined : design.links[via.landing];
  if (link?.kind !== 'landing') throw new Error(`${end.device}: the lab wants a landing named as via`);
  return link;
};

const connection = (
  design: Design,
  id: string,
  own: AssociationEnd,
  far: AssociationEnd,
  mayStart: boolean,
): string => {
  const [outside, there] = [landingOf(design, own), landingOf(design, far)];
  return `
  ${id} {
    version = ${own.ikeVersion ?? 0}
    local_addrs = ${outside.ipv4}
    remote_addrs = ${there.dynamic === true ? '%any' : there.ipv4}
    proposals = ${proposals(own.ikeProposals)}
    local { auth = psk
      id = ${own.identity} }
    remote { auth = psk
      id = ${far.identity} }
    children { ${id} {
      mode = tunnel
      esp_proposals = ${espProposals(own)}
      local_ts = ${inOrder(own.selectors)
        .map((selector) => selector.local)
        .join(', ')}
      remote_ts = ${inOrder(own.selectors)
        .map((selector) => selector.remote)
        .join(', ')}
      start_action = ${mayStart ? startActions[own.start ?? 'starts'] : 'none'}
    } }
  }`;
};

/**
 * The settings of one gateway's IKE daemon, as its associations say, or the same with nobody starting. The keys are made up here:
 * a design holds none.
 */
export const ikeSettings = (design: Design, device: string, mayStart: boolean): string => {
  const own = Object.entries(design.associations).flatMap(([id, { a, b }]) =>
    a.device === device ? [{ id, own: a, far: b }] : b.device === device ? [{ id, own: b, far: a }] : [],
  );
  const connections = own.map((one) => connection(design, one.id, one.own, one.far, mayStart));
  const secrets = own.map(
    ({ id, own: mine, far }) => `
  ike-${id} { id-1 = ${mine.identity}
    id-2 = ${far.identity}
    secret = "for this lab only, ${id}" }`,
  );
  return `connections {${connections.join('')}\n}\nsecrets {${secrets.join('')}\n}\n`;
};

// Debian's daemon with no more than these cases need. The last three carry ESP in user space, over UDP port 4500 always.
const plugins =
  'random nonce openssl aes des sha1 sha2 md5 hmac kdf gcm ctr chapoly curve25519 gmp xcbc vici updown kernel-libipsec kernel-netlink socket-default';

/** What the daemon itself reads when it starts: its plugins and where it can be spoken to. */
export const daemonSettings = (controlSocket: string): string => `charon-systemd {
  load = ${plugins}
  install_virtual_ip = no
  retransmit_tries = 2
  retransmit_timeout = 1.0
  plugins { vici { socket = unix://${controlSocket} } }
  journal { default = -1 }
}
`;
