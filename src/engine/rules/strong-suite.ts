import { rankBetween } from '../model/rank.ts';

const rank = rankBetween(undefined, undefined);

// RFC 8221 section 5 (ESP) and RFC 8247 section 2.1, section 2.2, section 2.4 (IKE): nothing here is below SHOULD.
export const strongIkeProposal = {
  rank,
  encryption: 'aes-gcm-16',
  keyBits: 256,
  prf: 'hmac-sha2-256',
  group: 19,
} as const;
export const strongEspProposal = { rank, encryption: 'aes-gcm-16', keyBits: 256, group: 19 } as const;

// Common practice, no source: a dead peer is noticed within half a minute, a short gap is not.
export const usualLiveness = { intervalSeconds: 10, tries: 3 } as const;
