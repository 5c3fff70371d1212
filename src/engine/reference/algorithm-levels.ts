/** How strongly a document asks implementations to have (or not to have) an algorithm. */
export interface AlgorithmLevel {
  readonly level: 'must' | 'should' | 'may' | 'should-not' | 'must-not';
  /** A plus or minus sign beside the level: expected to be raised or lowered by a later document. */
  readonly trend?: 'rising' | 'falling';
  /** The level is meant for small connected devices only. */
  readonly onlyForSmallDevices?: true;
  readonly source: string;
}

/** Levels by algorithm; one that its document doesn't list is absent, which means neither good nor bad. */
export type AlgorithmLevels = Readonly<Record<string, AlgorithmLevel>>;

const rfc9395 = 'RFC 9395 section 5';

const espEncryptionSource = 'RFC 8221 section 5';
// RFC 8221 section 5; the level of AES holds for keys of 128 and 256 bits, 192 bits is MAY.
export const espEncryptionLevels: AlgorithmLevels = {
  null: { level: 'must', source: espEncryptionSource },
  'aes-cbc': { level: 'must', source: espEncryptionSource },
  'aes-gcm-16': { level: 'must', source: espEncryptionSource },
  'chacha20-poly1305': { level: 'should', source: espEncryptionSource },
  'aes-ccm-8': { level: 'should', onlyForSmallDevices: true, source: espEncryptionSource },
  '3des-cbc': { level: 'should-not', source: espEncryptionSource },
  'des-cbc': { level: 'must-not', source: espEncryptionSource },
  'des-iv32': { level: 'must-not', source: `${espEncryptionSource}, ${rfc9395}` },
  'des-iv64': { level: 'must-not', source: `${espEncryptionSource}, ${rfc9395}` },
  '3idea': { level: 'must-not', source: `${espEncryptionSource}, ${rfc9395}` },
  'blowfish-cbc': { level: 'must-not', source: `${espEncryptionSource}, ${rfc9395}` },
};

const espIntegritySource = 'RFC 8221 section 6';
// RFC 8221 section 6.
export const espIntegrityLevels: AlgorithmLevels = {
  'hmac-sha2-256-128': { level: 'must', source: espIntegritySource },
  'hmac-sha1-96': { level: 'must', trend: 'falling', source: espIntegritySource },
  'hmac-sha2-512-256': { level: 'should', source: espIntegritySource },
  'aes-gmac': { level: 'may', source: espIntegritySource },
  'hmac-md5-96': { level: 'must-not', source: espIntegritySource },
  'des-mac': { level: 'must-not', source: espIntegritySource },
  'kpdk-md5': { level: 'must-not', source: espIntegritySource },
};

/** No integrity algorithm: required beside a combined-mode transform, forbidden beside any other. */
export const espWithoutIntegrityLevels = {
  // RFC 8221 section 6.
  besideCombinedMode: { level: 'must', source: espIntegritySource },
  // RFC 8221 section 4 and section 6.
  besideOthers: { level: 'must-not', source: 'RFC 8221 section 4' },
} as const satisfies Record<string, AlgorithmLevel>;

const ikeEncryptionSource = 'RFC 8247 section 2.1';
// RFC 8247 section 2.1.
export const ikeEncryptionLevels: AlgorithmLevels = {
  'aes-cbc': { level: 'must', source: ikeEncryptionSource },
  'chacha20-poly1305': { level: 'should', source: ikeEncryptionSource },
  'aes-gcm-16': { level: 'should', source: ikeEncryptionSource },
  'aes-ccm-8': { level: 'should', onlyForSmallDevices: true, source: ikeEncryptionSource },
  '3des-cbc': { level: 'may', source: ikeEncryptionSource },
  'des-cbc': { level: 'must-not', source: ikeEncryptionSource },
  null: { level: 'must-not', source: ikeEncryptionSource },
};

const ikePrfSource = 'RFC 8247 section 2.2';
// RFC 8247 section 2.2.
export const ikePrfLevels: AlgorithmLevels = {
  'hmac-sha2-256': { level: 'must', source: ikePrfSource },
  'hmac-sha2-512': { level: 'should', trend: 'rising', source: ikePrfSource },
  'hmac-sha1': { level: 'must', trend: 'falling', source: ikePrfSource },
  'aes128-xcbc': { level: 'should', onlyForSmallDevices: true, source: ikePrfSource },
  'hmac-md5': { level: 'must-not', source: ikePrfSource },
};

const ikeIntegritySource = 'RFC 8247 section 2.3';
// RFC 8247 section 2.3.
export const ikeIntegrityLevels: AlgorithmLevels = {
  'hmac-sha2-256-128': { level: 'must', source: ikeIntegritySource },
  'hmac-sha2-512-256': { level: 'should', source: ikeIntegritySource },
  'hmac-sha1-96': { level: 'must', trend: 'falling', source: ikeIntegritySource },
  'hmac-md5-96': { level: 'must-not', source: ikeIntegritySource },
  'des-mac': { level: 'must-not', source: ikeIntegritySource },
  'kpdk-md5': { level: 'must-not', source: ikeIntegritySource },
};

const keyExchangeSource = 'RFC 8247 section 2.4';
/** Levels of key-exchange groups by their IANA transform number. */
// RFC 8247 section 2.4.
export const keyExchangeGroupLevels: Readonly<Record<number, AlgorithmLevel>> = {
  14: { level: 'must', source: keyExchangeSource },
  19: { level: 'should', source: keyExchangeSource },
  2: { level: 'should-not', source: keyExchangeSource },
  5: { level: 'should-not', source: keyExchangeSource },
  23: { level: 'should-not', source: keyExchangeSource },
  24: { level: 'should-not', source: keyExchangeSource },
  1: { level: 'must-not', source: keyExchangeSource },
  22: { level: 'must-not', source: keyExchangeSource },
};
