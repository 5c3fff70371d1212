/** Every frame of a test says so, wherever it is captured. */
const marker = Buffer.from('longpatch');

// IEEE 802: 88-B5 is for local experiments; value from memory.
const experimental = 0x88b5;
const broadcast = 'ff:ff:ff:ff:ff:ff';

// RFC 791 section 3.1, RFC 768.
const ipv4HeaderBytes = 20;
const udpHeaderBytes = 8;
const dontFragment = 0x4000;

const macBytes = (mac: string): Buffer => Buffer.from(mac.replaceAll(':', ''), 'hex');

/** Locally administered address of the host with this number. */
export const macOf = (host: number): string =>
  `02:00:00:00:${(host >> 8).toString(16).padStart(2, '0')}:${(host & 0xff).toString(16).padStart(2, '0')}`;

const word = (value: number): Buffer => {
  const bytes = Buffer.alloc(2);
  bytes.writeUInt16BE(value);
  return bytes;
};

export interface FramePlan {
  readonly from: number;
  readonly to?: string;
  /** Tag control information with its TPID, outermost first. */
  readonly tags?: readonly { readonly tpid: number; readonly tci: number }[];
  readonly etherType?: number;
  readonly payload?: Buffer;
}

/** A frame as it goes to the wire, without FCS. */
export const frameOf = ({
  from,
  to = broadcast,
  tags = [],
  etherType = experimental,
  payload,
}: FramePlan): string =>
  Buffer.concat([
    macBytes(to),
    macBytes(macOf(from)),
    ...tags.flatMap(({ tpid, tci }) => [word(tpid), word(tci)]),
    word(etherType),
    payload ?? Buffer.concat([marker, word(from), Buffer.alloc(35)]),
  ]).toString('hex');

// RFC 1071 section 1.
const internetChecksum = (bytes: Buffer): number => {
  let sum = 0;
  for (let at = 0; at < bytes.length; at += 2) sum += bytes.readUInt16BE(at);
  while (sum > 0xffff) sum = (sum & 0xffff) + (sum >>> 16);
  return ~sum & 0xffff;
};

/** An IPv4 packet of this length, with or without DF, from one inside address to another, that holds the marker if it is long enough. */
export const ipv4Packet = (packetBytes: number, identification: number, isWhole = true): Buffer => {
  const header = Buffer.alloc(ipv4HeaderBytes);
  header.writeUInt8(0x45, 0);
  header.writeUInt16BE(packetBytes, 2);
  header.writeUInt16BE(identification, 4);
  if (isWhole) header.writeUInt16BE(dontFragment, 6);
  header.writeUInt8(64, 8);
  header.writeUInt8(17, 9);
  Buffer.from([10, 110, 0, 20]).copy(header, 12);
  Buffer.from([10, 110, 1, 20]).copy(header, 16);
  header.writeUInt16BE(internetChecksum(header), 10);
  const datagram = Buffer.alloc(packetBytes - ipv4HeaderBytes);
  datagram.writeUInt16BE(50_000, 0);
  // Discard, and no checksum: nobody listens, and what is compared are bytes.
  datagram.writeUInt16BE(9, 2);
  datagram.writeUInt16BE(datagram.length, 4);
  marker.copy(datagram, udpHeaderBytes);
  return Buffer.concat([header, datagram]);
};

/** Whether a captured frame is one of a test's own. */
export const isMarked = (hex: string): boolean => hex.includes(marker.toString('hex'));

/** The number of the host that sent a captured frame. */
export const senderOf = (hex: string): number => Number.parseInt(hex.slice(20, 24), 16);

/** What a captured frame of the underlay says of itself. */
export interface UnderlayPacket {
  readonly ipPacketBytes: number;
  readonly udpPort?: number;
  readonly isFragment: boolean;
}

/** Reads an outermost IPv4 or IPv6 packet; undefined for anything else. */
export const underlayPacketOf = (hex: string): UnderlayPacket | undefined => {
  const frame = Buffer.from(hex, 'hex');
  const etherType = frame.readUInt16BE(12);
  const packet = frame.subarray(14);
  if (etherType === 0x0800) {
    const fragment = packet.readUInt16BE(6) & 0x3fff;
    return {
      ipPacketBytes: packet.readUInt16BE(2),
      isFragment: fragment !== 0,
      ...(packet[9] === 17 && (fragment & 0x1fff) === 0
        ? { udpPort: packet.readUInt16BE(ipv4HeaderBytes + 2) }
        : {}),
    };
  }
  // RFC 8200 section 3: the length does not count the header itself.
  if (etherType === 0x86dd)
    return {
      ipPacketBytes: packet.readUInt16BE(4) + 40,
      isFragment: packet[6] === 44,
      ...(packet[6] === 17 ? { udpPort: packet.readUInt16BE(42) } : {}),
    };
  return undefined;
};
