import type { ElementRef } from '../model/design.ts';
import { landingOf } from '../network/association-path.ts';
import type { Network } from '../network/network.ts';
import { entryOf } from '../network/network.ts';
import type { LimitUsed } from '../load/load-of.ts';
import { defineRule } from './define-rule.ts';
import { loadFacts, loadReport, rateText } from './load-report.ts';
import { siteNameOf } from './places.ts';
import { portLabel } from './port-label.ts';
import { sentenceStart } from './sentence-start.ts';
import { cableName } from './storm-cuts.ts';

const placeOf = (network: Network, { collection, id, port }: ElementRef): string => {
  const { design } = network;
  if (collection === 'devices')
    return port === undefined ? entryOf(design.devices, id).name : portLabel(design, id, port);
  if (entryOf(design.links, id).kind === 'cable') return cableName(network, id);
  const { transport, device } = landingOf(network, id);
  return `${entryOf(design.transports, transport).name} at ${siteNameOf(design, device)}`;
};

/** Limits that are asked for more than they have, the fullest of each element. */
const overloaded = (network: Network): readonly LimitUsed[] => {
  const seen = new Set<string>();
  return (loadReport(network)?.limits ?? []).filter(({ headroom, limit: { element } }) => {
    const key = `${element.collection} ${element.id} ${element.port ?? ''}`;
    if (headroom === undefined || headroom >= 0 || seen.has(key)) return false;
    seen.add(key);
    return true;
  });
};

export const limitOverloaded = defineRule({
  id: 'limit-overloaded',
  title: 'Lines and gateways have room for what the demands put on them',
  severity: 'degrading',
  looksAt: loadFacts,
  why: 'Together, and grown by VXLAN and IPsec, the demands are more than this takes. What is too much is queued and then dropped, and with it the hellos and keepalives of everything else.',
  seen: 'Loss and delay at busy hours, tunnels that flap under load, and transfers far below the rate of the line.',
  sources: [{ document: 'RFC 6985', clause: 'sections 1 and 3' }, 'common practice, no source'],
  messages: {
    over: {
      words: 'not enough room',
      sentence: (v: {
        readonly place: string;
        readonly verb: string;
        readonly used: string;
        readonly most: string;
      }) => `${sentenceStart(v.place)} must ${v.verb} ${v.used}, takes ${v.most}`,
    },
  },
  check: (network) =>
    overloaded(network).map(({ limit, used, demands }) => {
      const { element, kind, cipher, most = 0 } = limit;
      // Where three digits don't tell the two apart more of them do.
      const digits = rateText(used) === rateText(most) ? 6 : 3;
      const figure = (value: number): string =>
        kind === 'gateway-packets' ? `${value} packets/s` : rateText(value, digits);
      return {
        message: 'over',
        values: {
          place: placeOf(network, element),
          verb: cipher === 'encrypted' ? 'encrypt' : cipher === 'plain' ? 'forward' : 'carry',
          used: kind === 'gateway-one-flow' ? `${figure(used)} in one flow` : figure(used),
          most: figure(most),
        },
        elements: [element, ...demands.map((id): ElementRef => ({ collection: 'demands', id }))],
        identity: [element.collection, element.id, ...(element.port === undefined ? [] : [element.port])],
        properties: demands.map((id) => ({
          ref: { collection: 'demands' as const, id },
          path: ['forwardBps'],
        })),
        basis: [limit.key, used, most],
      };
    }),
});
