import ipaddr from 'ipaddr.js';
import type { Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';

const candidate = /[0-9A-Fa-f:.]*[0-9A-Fa-f][:.][0-9A-Fa-f:.]*[0-9A-Fa-f:](?:\/\d{1,3})?/g;

/** A text with every IP address and prefix in it left out. */
export function withoutWrittenAddresses(text: string): string {
  return text.replace(candidate, (found) => (isAddress(found.split('/', 1)[0]!) ? '(left out)' : found));
}

// A version such as 7.2 is read as an address by some; only four parts count.
function isAddress(text: string): boolean {
  return ipaddr.IPv4.isValidFourPartDecimal(text) || (text.includes(':') && ipaddr.IPv6.isValid(text));
}

/** A design whose notes say no addresses; those that belong to its parts are the drawing's to leave out. */
export function withQuietNotes(design: Design): Design {
  const notes = Object.entries(design.notes).map(
    ([id, note]) => [id, { text: withoutWrittenAddresses(note.text) }] as const,
  );
  return applyPatch(design, { notes: Object.fromEntries(notes) });
}
