import { rate } from '../../lib/rate-text.ts';
import { plainText, wholeNumber, type Reading, type Writing } from '../../lib/written-value.ts';
import { reservedGroupNames } from '../../engine/trace/reserved-groups.ts';

interface FieldBase {
  /** Keys below the profile. */
  readonly path: readonly string[];
  readonly label: string;
  /** What it means, how it is found out, and what is made of it. */
  readonly about: string;
}
export type ProfileField =
  | (FieldBase & {
      readonly kind: 'typed';
      readonly write: (value: unknown) => string;
      readonly read: (text: string) => Reading<string | number>;
      readonly unit: string | undefined;
      readonly inputMode: Writing<string>['inputMode'];
      readonly long: boolean;
    })
  | (FieldBase & {
      readonly kind: 'chosen';
      readonly choices: readonly { readonly value: string | number; readonly label: string }[];
    });

export interface FieldSection {
  readonly title: string;
  readonly fields: readonly ProfileField[];
}

const typed = <T extends string | number>(
  path: readonly string[],
  label: string,
  { write, read, unit, inputMode }: Writing<T>,
  about: string,
  long = false,
): ProfileField => ({
  kind: 'typed',
  path,
  label,
  about,
  write: (value) => write(value as T),
  read,
  unit,
  inputMode,
  long,
});

const throughput = (
  kind: 'plain' | 'encrypted',
  words: { readonly one: string; readonly many: string; readonly packets: string },
): readonly ProfileField[] => [
  typed([kind, 'oneFlowBps'], 'One flow', rate, words.one),
  typed([kind, 'manyFlowsBps'], 'Many flows', rate, words.many),
  typed([kind, 'packetsPerSecond'], 'Packets', wholeNumber('/s'), words.packets),
];

/** What a profile says, in the order of the form, each with an explanation. */
export const profileSections: readonly FieldSection[] = [
  {
    title: 'What it is',
    fields: [
      typed(
        ['name'],
        'Name',
        plainText,
        'A class of equipment in your own words, as wide as the figures hold: one size of gateway with one major version of its software.',
      ),
      typed(
        ['basis'],
        'Basis',
        plainText,
        'Who measured, when, with what, and with which settings. A figure of somebody else’s is a claim: say so here, and whose it is.',
        true,
      ),
    ],
  },
  {
    title: 'Throughput with encryption',
    fields: [
      ...throughput('encrypted', {
        one: 'The most that one flow gets through the tunnel, counted in the hosts’ packets. One flow mostly stays on one core or one crypto engine, so this is far below the total. Load holds each demand’s largest flow against it.',
        many: 'The most of all flows together. Load holds the sum of all demands through the gateway against it.',
        // IEEE 802.3-2022 clause 4.4.2, from memory: 8 bytes of preamble and 12 of gap go with every frame.
        packets:
          'Frames handled in a second, both ways together. Small packets meet this limit long before the bit rate: 64-byte frames fill 100 Mbit/s at 148,809 a second.',
      }),
      {
        kind: 'chosen',
        path: ['encryption'],
        label: 'Done by',
        choices: [
          { value: 'offloaded', label: 'offload hardware' },
          { value: 'cpu', label: 'the CPU' },
        ],
        about:
          'Offload hardware keeps its rate whatever else the device does. The CPU shares itself with routing, filters and logging, so its rate falls on a busy day.',
      },
      typed(
        ['cpuWhen'],
        'Falls back to the CPU',
        plainText,
        'When offload gives up: fragments, packets with options, an algorithm that it lacks, a packet capture that runs. Known only from measuring.',
        true,
      ),
    ],
  },
  {
    title: 'Throughput without encryption',
    fields: throughput('plain', {
      one: 'As above, for VXLAN that no IPsec protects.',
      many: 'All flows together, without encryption.',
      packets: 'Frames handled in a second without encryption, both ways together.',
    }),
  },
  {
    title: 'Behaviour',
    fields: [
      {
        kind: 'chosen',
        path: ['oversizeDf'],
        label: 'Too large, with DF',
        choices: [
          { value: 'silent', label: 'dropped without a word' },
          { value: 'icmp', label: 'dropped, sender told' },
          { value: 'fragment', label: 'cut all the same' },
        ],
        about:
          'What becomes of a packet that is too large for the way on and carries DF. Dropped without a word is the worst: pings pass and large frames vanish. Send one of 1,500 bytes with DF through and watch both sides.',
      },
      {
        kind: 'chosen',
        path: ['multicastTtl'],
        label: 'Multicast TTL',
        choices: [
          { value: 'kept', label: 'kept' },
          { value: 'lowered', label: 'lowered by one' },
        ],
        about:
          'Whether multicast that it bridges keeps its TTL. Hellos of routing protocols leave with TTL 1: lowered once, they arrive nowhere. Capture on both sides of the bridge.',
      },
      {
        kind: 'chosen',
        path: ['vniScope'],
        label: 'One VNI names',
        choices: [
          { value: 'endpoint', label: 'one tunnel per endpoint' },
          { value: 'peer', label: 'one tunnel per peer' },
          { value: 'multipoint', label: 'several tunnels, as one circuit' },
        ],
        about:
          'How far a VNI has to be unique on it: at the endpoint, towards each peer, or not at all because tunnels of one VNI are one port with several far ends, which never pass frames to one another.',
      },
      typed(
        ['macTable'],
        'MAC table',
        wholeNumber(),
        'How many addresses it learns. A full table floods what it does not know to every site; the checks compare it with the hosts that segments expect.',
      ),
      {
        kind: 'chosen',
        path: ['hmacSha256Bits'],
        label: 'HMAC-SHA2-256 cut to',
        // RFC 4868 section 2.3: 128 bits.
        choices: [
          { value: 128, label: '128 bits, as the standard says' },
          { value: 96, label: '96 bits, as an early draft said' },
        ],
        about:
          'Bits of the integrity value that are left on a packet. Where two ends differ the association comes up and each refuses every packet of the other.',
      },
    ],
  },
  {
    title: 'Reserved group addresses',
    // IEEE 802.1Q-2022 table 8-1: 01-80-C2-00-00-00 to -0F, from memory.
    fields: Array.from({ length: 16 }, (_, number): ProfileField => {
      const octet = number.toString(16).padStart(2, '0');
      return {
        kind: 'chosen',
        path: ['reservedGroups', octet],
        label: `01-80-C2-00-00-${octet.toUpperCase()}`,
        choices: [
          { value: 'drop', label: 'dropped' },
          { value: 'pass', label: 'passed on' },
          { value: 'peer', label: 'taken in' },
        ],
        about: reservedGroupNames[octet] ?? 'no use known',
      };
    }),
  },
];

/** A field's name in a draft, and in what the server says of it. */
export const fieldKey = ({ path }: Pick<ProfileField, 'path'>): string => path.join('.');

export const profileFields: readonly ProfileField[] = profileSections.flatMap(({ fields }) => fields);
