// RFC 4303 section 2: assigned protocol number.
export const ESP_PROTOCOL_NUMBER = 50;

// RFC 4303 section 2: security parameters index and sequence number.
export const ESP_HEADER_BYTES = 8;

// RFC 4303 section 2: pad length and next header.
export const ESP_TRAILER_BYTES = 2;

// RFC 4303 section 3.4.3: a window of 32 packets is the least to be supported.
export const SMALLEST_REPLAY_WINDOW_PACKETS = 32;

// RFC 4303 section 3.4.3: 64 packets are preferred as the default.
export const PREFERRED_REPLAY_WINDOW_PACKETS = 64;

/** What an ESP encryption transform adds to a packet. */
export interface EspTransform {
  readonly name: string;
  readonly ivBytes: number;
  /** Integrity check value of a combined-mode transform; 0 where a separate integrity algorithm brings it. */
  readonly icvBytes: number;
  /** Payload, padding, pad length and next header together are a multiple of this. */
  readonly padMultipleBytes: number;
  /** Combined mode: encrypts and protects integrity in one. */
  readonly aead: boolean;
  /** Key sizes allowed, parity bits included. */
  readonly keyBits: readonly number[];
}

// RFC 4303 section 2.4: without a block size of its own, a transform still aligns the trailer to 4 octets.
const ALIGNMENT_BYTES = 4;

export const espTransforms = {
  // RFC 4106 section 3.1 (IV), section 6 (ICV 16, optionally 8 or 12), section 7 (no padding need beyond ESP's).
  'aes-gcm-16': {
    name: 'AES-GCM, 16-byte ICV',
    ivBytes: 8,
    icvBytes: 16,
    padMultipleBytes: ALIGNMENT_BYTES,
    aead: true,
    keyBits: [128, 192, 256],
  },
  // RFC 4106 section 3.1, section 6.
  'aes-gcm-12': {
    name: 'AES-GCM, 12-byte ICV',
    ivBytes: 8,
    icvBytes: 12,
    padMultipleBytes: ALIGNMENT_BYTES,
    aead: true,
    keyBits: [128, 192, 256],
  },
  // RFC 4106 section 3.1, section 6.
  'aes-gcm-8': {
    name: 'AES-GCM, 8-byte ICV',
    ivBytes: 8,
    icvBytes: 8,
    padMultipleBytes: ALIGNMENT_BYTES,
    aead: true,
    keyBits: [128, 192, 256],
  },
  // RFC 7634 section 2.
  'chacha20-poly1305': {
    name: 'ChaCha20-Poly1305',
    ivBytes: 8,
    icvBytes: 16,
    padMultipleBytes: ALIGNMENT_BYTES,
    aead: true,
    keyBits: [256],
  },
  // RFC 3602 section 2.4 (block), section 3 (IV).
  'aes-cbc': {
    name: 'AES-CBC',
    ivBytes: 16,
    icvBytes: 0,
    padMultipleBytes: 16,
    aead: false,
    keyBits: [128, 192, 256],
  },
  // RFC 3686 section 3.1 to section 3.3.
  'aes-ctr': {
    name: 'AES-CTR',
    ivBytes: 8,
    icvBytes: 0,
    padMultipleBytes: ALIGNMENT_BYTES,
    aead: false,
    keyBits: [128, 192, 256],
  },
  // RFC 2410 section 2.2, section 2.3 and section 3: block size 1, no IV, no key.
  null: {
    name: 'NULL (no encryption)',
    ivBytes: 0,
    icvBytes: 0,
    padMultipleBytes: ALIGNMENT_BYTES,
    aead: false,
    keyBits: [],
  },
  // RFC 2451 section 2 and section 3: 64-bit block, IV of one block; values from memory.
  '3des-cbc': { name: '3DES-CBC', ivBytes: 8, icvBytes: 0, padMultipleBytes: 8, aead: false, keyBits: [192] },
  // RFC 2405 section 2 and section 3: 64-bit block, IV of one block; values from memory.
  'des-cbc': { name: 'DES-CBC', ivBytes: 8, icvBytes: 0, padMultipleBytes: 8, aead: false, keyBits: [64] },
} as const satisfies Record<string, EspTransform>;

export type EspTransformId = keyof typeof espTransforms;
export const espTransformIds = Object.keys(espTransforms) as readonly EspTransformId[];

/** What a separate ESP integrity algorithm adds to a packet. */
export interface EspIntegrity {
  readonly name: string;
  readonly icvBytes: number;
}

export const espIntegrities = {
  // RFC 2403 section 2: 128-bit output truncated to 96 bits; value from memory.
  'hmac-md5-96': { name: 'HMAC-MD5-96', icvBytes: 12 },
  // RFC 2404 section 2: output truncated to 96 bits.
  'hmac-sha1-96': { name: 'HMAC-SHA1-96', icvBytes: 12 },
  // RFC 4868 section 2.3: output truncated to half the hash.
  'hmac-sha2-256-128': { name: 'HMAC-SHA2-256-128', icvBytes: 16 },
  // RFC 4868 section 2.3: output truncated to half the hash.
  'hmac-sha2-384-192': { name: 'HMAC-SHA2-384-192', icvBytes: 24 },
  // RFC 4868 section 2.3: output truncated to half the hash.
  'hmac-sha2-512-256': { name: 'HMAC-SHA2-512-256', icvBytes: 32 },
} as const satisfies Record<string, EspIntegrity>;

export type EspIntegrityId = keyof typeof espIntegrities;
export const espIntegrityIds = Object.keys(espIntegrities) as readonly EspIntegrityId[];
