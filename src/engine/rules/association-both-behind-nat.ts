import { hiddenAlike } from './hidden-alike.ts';
import { defineRule } from './define-rule.ts';
import { meetingFixes } from './meeting-fixes.ts';

export const associationBothBehindNat = defineRule({
  id: 'association-both-behind-nat',
  title: 'At least one end of an association can be reached from outside',
  severity: 'blocking',
  looksAt: ['associations', 'landings', 'carriers', 'gateways', 'sites'],
  why: 'A NAT lets nothing in that was not asked for from inside. With one at both ends neither first packet arrives.',
  seen: 'Both ends send the first IKE packet again and again; neither sees the one of the other.',
  sources: [{ document: 'RFC 7296', clause: 'section 2.23' }],
  messages: {
    bothBehindNat: {
      words: 'NAT at both',
      sentence: (v: { readonly association: string; readonly placeA: string; readonly placeB: string }) =>
        `${v.placeA} and ${v.placeB} are both behind NAT that forwards nothing`,
    },
  },
  check: (network) =>
    hiddenAlike(network, 'both-behind-nat').map((fault) => ({ message: 'bothBehindNat', ...fault })),
  fixes: (fault, network) => meetingFixes(network, fault.elements[0]!.id),
});
