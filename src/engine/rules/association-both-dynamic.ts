import { hiddenAlike } from './hidden-alike.ts';
import { defineRule } from './define-rule.ts';
import { meetingFixes } from './meeting-fixes.ts';

export const associationBothDynamic = defineRule({
  id: 'association-both-dynamic',
  title: 'At least one end of an association has a lasting address or name',
  severity: 'blocking',
  looksAt: ['associations', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'Neither end knows where to send the first packet, since both outside addresses change.',
  seen: 'The association works until an address changes, then stays down until somebody looks up the new one by hand.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.23' }, 'common practice, no source'],
  messages: {
    bothDynamic: {
      words: 'both dynamic',
      sentence: (v: { readonly association: string; readonly placeA: string; readonly placeB: string }) =>
        `${v.placeA} and ${v.placeB} both have changing addresses and no name`,
    },
  },
  check: (network) =>
    hiddenAlike(network, 'both-dynamic').map((fault) => ({ message: 'bothDynamic', ...fault })),
  fixes: (fault, network) => meetingFixes(network, fault.elements[0]!.id),
});
