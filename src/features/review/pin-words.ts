import type { Pin } from '../../contract/comments.ts';
import type { Design, ElementRef } from '../../engine/model/design.ts';
import { kindOf, nameOf } from '../../workspace/operations/name-of.ts';
import { propertyLabel } from './property-words.ts';

/** Whether an element is in the design now. */
export const isThere = (design: Design, { collection, id, port }: ElementRef): boolean =>
  Object.hasOwn(design[collection], id) &&
  (port === undefined || (collection === 'devices' && Object.hasOwn(design.devices[id]?.ports ?? {}, port)));

export interface PinWords {
  /** What kind of thing it is: 'Tunnel', 'Finding'. */
  readonly kind: string;
  /** Its name now, or as it was called when the thread began. */
  readonly name: string;
  /** The property that is meant. */
  readonly property?: string;
  /** What it was about is no longer in the design. */
  readonly gone: boolean;
}

/** What a thread is about, in words. `hasFinding` says whether the checks still find it. */
export const pinWords = (pin: Pin, design: Design, hasFinding: (findingKey: string) => boolean): PinWords => {
  switch (pin.kind) {
    case 'design':
      return { kind: 'Design', name: design.meta.title, gone: false };
    case 'element': {
      const there = isThere(design, pin.ref);
      return {
        kind: there ? kindOf(design, pin.ref) : 'Element',
        name: there ? nameOf(design, pin.ref) : pin.called,
        ...(pin.path.length === 0 ? {} : { property: propertyLabel(pin.ref, pin.path) }),
        gone: !there,
      };
    }
    case 'finding':
      return { kind: 'Finding', name: pin.called, gone: !hasFinding(pin.key) };
  }
};
