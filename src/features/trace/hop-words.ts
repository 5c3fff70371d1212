import type { Design, ElementRef } from '../../engine/model/design.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import { deviceAt } from '../../engine/trace/device-at.ts';
import type { TraceStep, Verdict } from '../../engine/trace/trace.ts';
import { nameOf } from '../../workspace/operations/name-of.ts';

/** A device as its end of a hop names it: of a pair the member. */
const deviceName = (design: Design, end: ElementRef): string => {
  const device = design.devices[deviceAt(design, end)];
  if (device === undefined) return end.id;
  return device.kind === 'ha-pair' && end.member !== undefined ? device.memberNames[end.member] : device.name;
};

const siteName = (design: Design, end: ElementRef): string | undefined => {
  const site = design.devices[deviceAt(design, end)]?.site;
  return site === undefined ? undefined : design.sites[site]?.name;
};

const transportOf = (design: Design, { elements }: TraceStep): string | undefined => {
  const ref = elements.find(({ collection }) => collection === 'transports');
  return ref === undefined ? undefined : nameOf(design, ref);
};

/** The forwarder of a device that holds a tunnel. */
const holderOf = (design: Design, device: string, tunnel: string): string | undefined => {
  const at = indexNetwork(design)
    .circuitsByTunnel.get(tunnel)
    ?.find((circuit) => circuit.device === device);
  return at === undefined ? undefined : design.forwarders[at.forwarder]?.name;
};

const tagWords = (tags: readonly number[]): string =>
  `${tags.length === 1 ? 'tag' : 'tags'} ${tags.join(' and ')}`;

/** What stands on the frame, and what has become of it since the hop before. */
const tagNote = (step: TraceStep, before: TraceStep | undefined): string => {
  const { tags } = step;
  const earlier = before?.crossing === undefined ? undefined : before.tags;
  const vlan = step.decisions.find((decision) => decision.code === 'put-in-vlan');
  if (vlan?.code === 'put-in-vlan') return `access port, VLAN ${vlan.vlan}`;
  if (tags.length === 0)
    return earlier !== undefined && earlier.length > 0 ? `${tagWords(earlier)} taken off` : 'untagged';
  return earlier !== undefined && earlier.join() !== tags.join() ? `${tagWords(tags)} added` : tagWords(tags);
};

const cutNote = ({ pieces }: TraceStep): string =>
  pieces === undefined ? '' : `cut into ${pieces.map(({ packetBytes }) => packetBytes).join(' + ')} B`;

const joined = (...notes: readonly (string | undefined)[]): string =>
  notes.filter((note) => note !== undefined && note !== '').join(', ');

const tunnelNote = (design: Design, step: TraceStep, transport: string | undefined): string => {
  const tunnel = step.elements[0]!.id;
  const isProtected = design.tunnels[tunnel]?.association !== undefined;
  const isBehindNat = step.wire?.layers.some(({ id }) => id === 'nat-traversal-udp') ?? false;
  const reason = step.verdict?.code === 'dropped' ? step.verdict.reason : undefined;
  return joined(
    isProtected ? (isBehindNat ? 'ESP in UDP added' : 'ESP added') : 'VXLAN added',
    reason?.code === 'oversize' && reason.because === 'df-set' ? 'outer DF set' : undefined,
    cutNote(step),
    transport === undefined ? undefined : `over ${transport}`,
  );
};

interface HopWords {
  readonly title: string;
  readonly note: string;
  readonly measure: string;
  readonly sentences: string;
}

const sentence = (text: string): string => `${text.slice(0, 1).toUpperCase()}${text.slice(1)}.`;

/** What a hop's row says: from where to where, what happens, how it fits, and all of it in sentences. */
export const hopWords = (design: Design, step: TraceStep, before: TraceStep | undefined): HopWords => {
  const { from, to, elements, wire, crossing, decisions, verdict } = step;
  const decided = decisions.map(({ words }) => sentence(words)).join(' ');
  if (from === undefined || to === undefined) {
    const [source] = elements;
    const title = `${source?.port === undefined ? 'at' : 'into'} ${nameOf(design, source!)}`;
    const other = decisions.find(({ code }) => code === 'other-segment');
    return {
      title,
      note: joined(
        source?.port === undefined ? undefined : tagNote(step, before),
        cutNote(step),
        other === undefined ? undefined : 'to another segment',
      ),
      measure: '',
      sentences: `${sentence(title)} ${decided}`,
    };
  }
  const isTunnel = crossing?.collection === 'tunnels';
  const transport = isTunnel ? transportOf(design, step) : undefined;
  const isLostOnTheWay =
    verdict?.code === 'dropped' && ['oversize', 'transport-filters'].includes(verdict.reason.code);
  const far = isLostOnTheWay && transport !== undefined ? transport : deviceName(design, to);
  const title = `${deviceName(design, from)} to ${far}`;
  const note = isTunnel
    ? tunnelNote(design, step, isLostOnTheWay ? undefined : transport)
    : joined(wire === undefined ? undefined : tagNote(step, before), cutNote(step));
  const over = wire?.mtuBytes === undefined ? 0 : Math.max(0, wire.outerIpPacketBytes - wire.mtuBytes);
  const measure =
    wire === undefined
      ? 'not sent'
      : wire.mtuBytes === undefined
        ? `${wire.outerIpPacketBytes} B, pipe not known`
        : `${wire.outerIpPacketBytes} B in a ${wire.mtuBytes} B pipe`;
  const sizes =
    wire === undefined
      ? 'Nothing is sent.'
      : `${wire.outerIpPacketBytes} bytes${wire.mtuBytes === undefined ? '; how long they may be is not known' : ` in a pipe of ${wire.mtuBytes}${over > 0 ? `, ${over} over` : ''}`}.`;
  const through = isTunnel ? ` through ${nameOf(design, elements[0]!)}` : '';
  return {
    title,
    note,
    measure,
    sentences: [`${title}${through}${note === '' ? '' : `, ${note}`}.`, sizes, decided]
      .filter((part) => part !== '')
      .join(' '),
  };
};

/** What the row of the packet inside its gateway says. */
export const insideWords = (
  design: Design,
  { from, elements, decisions, tags, crossing }: TraceStep,
  before: TraceStep | undefined,
): { readonly title: string; readonly note: string } => {
  const tunnel = design.tunnels[elements[0]!.id];
  const device = deviceAt(design, from!);
  const vni = crossing?.direction === 'b-to-a' ? tunnel?.b.vni : tunnel?.a.vni;
  const holder = holderOf(design, device, elements[0]!.id);
  const lost = before?.crossing?.collection === 'links' && before.tags.length > tags.length;
  const isEncapsulated = decisions.some(({ code }) => code === 'encapsulated');
  return {
    title: `inside ${nameOf(design, { collection: 'devices', id: device })}`,
    note: joined(
      isEncapsulated
        ? `${holder === undefined ? 'sent' : `${holder} sends it`} into ${vni === undefined ? 'VXLAN' : `VNI ${vni}`}`
        : undefined,
      lost ? 'tag stripped' : tags.length > 0 ? `${tagWords(tags)} kept` : undefined,
    ),
  };
};

/** What one of several ways is called: its far site through a tunnel, else the next device. */
export const branchTitle = (design: Design, { from, to, elements, crossing }: TraceStep): string => {
  if (from === undefined || to === undefined) return nameOf(design, elements[0]!);
  if (crossing?.collection === 'tunnels')
    return `To ${siteName(design, to) ?? deviceName(design, to)} through ${nameOf(design, elements[0]!)}`;
  return `To ${deviceName(design, to)}`;
};

/** How a copy ends; hops are named by their numbers in the strip. */
export const leafWords = (verdict: Verdict, numberOf: (step: number) => number | undefined): string => {
  if (verdict.code !== 'circulating' && verdict.code !== 'repeats') return verdict.words;
  const number = numberOf(verdict.sameAs);
  const same = number === undefined ? 'on a way that another copy takes' : `on the way of hop ${number}`;
  if (verdict.code === 'repeats') return `One more copy ${same}`;
  return verdict.cycle === undefined
    ? `One more copy without end ${same}`
    : `Comes round to where it was on hop ${number ?? 1}, and so for ever`;
};
