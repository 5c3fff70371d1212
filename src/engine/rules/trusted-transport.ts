import type { Entry } from '../model/design.ts';

/** Whether a transport needs no protection: as stated, and where nothing is stated only one's own. */
export const isTrusted = (transport: Entry<'transports'>): boolean =>
  transport.trusted ?? transport.kind === 'own-routed';
