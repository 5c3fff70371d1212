import type { FloodStep } from '../flood/storm.ts';
import type { ElementRef } from '../model/design.ts';
import type { AssociationReason, TunnelReason } from '../network/can-come-up.ts';
import type { DropReason, Explanation } from './trace.ts';

/** As much of a finding as it takes to point at it. */
export interface KnownFinding {
  readonly key: string;
  readonly rule: string;
  readonly elements: readonly ElementRef[];
}

const associationRules: { readonly [code in AssociationReason['code']]: string } = {
  'no-path': 'association-no-common-path',
  'ike-versions-differ': 'ike-version-mismatch',
  'authentication-differs': 'authentication-mismatch',
  'proposals-differ': 'association-proposals-differ',
  'nobody-starts': 'association-nobody-starts',
  'both-dynamic': 'association-both-dynamic',
  'both-behind-nat': 'association-both-behind-nat',
  'neither-reachable': 'association-neither-reachable',
  'wrong-initiator': 'association-wrong-initiator',
  'transport-filters': 'transport-filters-needed',
};
const tunnelRules: { readonly [code in TunnelReason['code']]?: string } = {
  'no-path': 'tunnel-no-common-path',
  'transport-filters': 'transport-filters-needed',
  'ends-off-association': 'tunnel-ends-off-association',
  'families-differ': 'tunnel-families-differ',
  'selectors-miss': 'association-selectors-miss-loopbacks',
  'endpoint-on-standby': 'endpoint-on-one-member',
};

const ref = (collection: ElementRef['collection'], id: string): ElementRef => ({ collection, id });

const tunnelElements = (tunnel: string, association: string | undefined): readonly ElementRef[] => [
  ref('tunnels', tunnel),
  ...(association === undefined ? [] : [ref('associations', association)]),
];

/** Rules that look for the cause of a drop, and what their finding would be about. */
const candidates = (
  reason: DropReason,
  association: (tunnel: string) => string | undefined,
): readonly Explanation[] => {
  const told = (rules: readonly string[], ...elements: readonly ElementRef[]): readonly Explanation[] =>
    rules.map((rule) => ({ rule, elements }));
  switch (reason.code) {
    case 'no-such-vni':
      return told(['tunnel-vni-mismatch'], ref('tunnels', reason.tunnel));
    case 'no-such-udp-port':
      return told(['tunnel-udp-port-mismatch'], ref('tunnels', reason.tunnel));
    case 'association-down':
      return told(
        [...new Set(reason.reasons.map(({ code }) => associationRules[code]))],
        ref('associations', reason.association),
        ...reason.reasons.flatMap((one) =>
          one.code === 'transport-filters' ? [ref('transports', one.transport)] : [],
        ),
      );
    case 'tunnel-down':
      return told(
        [
          ...new Set(
            reason.reasons.map(({ code }) => tunnelRules[code]).filter((rule) => rule !== undefined),
          ),
        ],
        ...tunnelElements(reason.tunnel, association(reason.tunnel)),
      );
    case 'transport-filters':
      return reason.filter === 'fragments'
        ? told(['frame-exceeds-path'], ref('tunnels', reason.tunnel))
        : told(
            ['transport-filters-needed'],
            ref('transports', reason.transport),
            ref('tunnels', reason.tunnel),
          );
    case 'oversize':
      return told(['frame-exceeds-path'], ref('tunnels', reason.tunnel));
    case 'filter':
      return reason.rule === undefined
        ? told(['cross-connect-without-policy'], ref('forwarders', reason.forwarder))
        : [];
    case 'tag-discarded':
      return told(['tunnel-tag-mode-mismatch'], ref('tunnels', reason.tunnel));
    case 'tunnel-unclaimed':
      return told(['segment-hosts-parted'], ref('tunnels', reason.tunnel), ref('devices', reason.device));
    case 'isolation':
      return told(
        ['isolation-missing-leg'],
        ref('forwarders', reason.forwarder),
        ref('devices', reason.device),
      );
    case 'vlan-not-allowed':
    case 'other-access-vlan':
    case 'no-native-vlan':
    case 'tag-at-access-port':
    case 'no-circuit':
      return told(['vlan-missing-on-path', 'segment-hosts-parted'], ref('devices', reason.device));
    case 'tag-not-carried':
      return told(
        ['vlan-missing-on-path', 'segment-hosts-parted'],
        ref('forwarders', reason.forwarder),
        ref('devices', reason.device),
      );
    default:
      return [];
  }
};

const isAbout = (finding: KnownFinding, elements: readonly ElementRef[]): boolean =>
  finding.elements.some((one) =>
    elements.some(({ collection, id }) => one.collection === collection && one.id === id),
  );

/** Where findings are at hand only those that were made are pointed at; otherwise the rules that would look. */
const made = (
  explanations: readonly Explanation[],
  findings: readonly KnownFinding[] | undefined,
): readonly Explanation[] =>
  findings === undefined
    ? explanations
    : explanations.flatMap((one) =>
        findings
          .filter((finding) => finding.rule === one.rule && isAbout(finding, one.elements))
          .map(({ rule, elements, key }) => ({ rule, elements, key })),
      );

/** The checks that tell of the cause of a drop. */
export const explainDrop = (
  reason: DropReason,
  association: (tunnel: string) => string | undefined,
  findings: readonly KnownFinding[] | undefined,
): readonly Explanation[] => made(candidates(reason, association), findings);

/** The checks that tell of a storm. */
export const explainStorm = (
  cycle: readonly FloodStep[],
  findings: readonly KnownFinding[] | undefined,
): readonly Explanation[] => {
  const elements = [
    ...new Map(cycle.map(({ collection, id }) => [`${collection} ${id}`, ref(collection, id)])).values(),
  ];
  return made(
    ['storm-any-to-any-mesh', 'storm-customer-cable', 'storm-local'].map((rule) => ({ rule, elements })),
    findings,
  );
};
