import type { Pin, PinTo } from '#contract/comments.ts';
import { elementName, plugName } from '#engine/diff/element-names.ts';
import type { Design, ElementRef } from '#engine/model/design.ts';
import { Refusal } from '../errors.ts';
import type { CheckFacts } from './check-facts.ts';
import { findingsBy } from './check-facts.ts';

const mostCharacters = 200;
const cut = (text: string): string =>
  text.length > mostCharacters ? `${text.slice(0, mostCharacters - 1)}…` : text;

/** What a new thread is about, as it stands in the design now; null for the whole design. Refuses what is not there. */
export function pinnedTo(document: Design, facts: CheckFacts, pin: PinTo): Pin | null {
  switch (pin.kind) {
    case 'design':
      return null;
    case 'element': {
      const { ref, path = [] } = pin;
      if (!isThere(document, ref))
        throw nothingThere('pin.ref', `${ref.collection}/${ref.id}`, 'such element', 'an element');
      return { kind: 'element', ref, path: [...path], called: cut(calledIn(document, ref)) };
    }
    case 'finding': {
      const { open, covered } = findingsBy(document, facts);
      const finding = [...open, ...covered.map((each) => each.finding)].find(({ key }) => key === pin.key);
      if (finding === undefined)
        throw nothingThere('pin.key', pin.key.slice(0, 80), 'such finding', 'the key of a finding');
      return {
        kind: 'finding',
        key: finding.key,
        ref: finding.elements[0] ?? null,
        called: cut(finding.sentence),
      };
    }
  }
}

const calledIn = (document: Design, { collection, id, port, member }: ElementRef): string =>
  port === undefined
    ? elementName(document, collection, id)
    : plugName(document, { device: id, port, member });

function isThere(document: Design, { collection, id, port, member }: ElementRef): boolean {
  if (!Object.hasOwn(document[collection], id)) return false;
  const device = collection === 'devices' ? document.devices[id] : undefined;
  if (member !== undefined && device?.kind !== 'ha-pair') return false;
  return port === undefined || (device !== undefined && Object.hasOwn(device.ports, port));
}

function nothingThere(path: string, value: string, what: string, expected: string): Refusal {
  return new Refusal(
    'conflict',
    `The design as it is saved has no ${what}; it may be gone, or not saved yet. Look again, then comment.`,
    { details: [{ path, value, expected: `expected ${expected} of the design` }] },
  );
}
