import { useMemo, useState, type KeyboardEvent } from 'react';
import { Dialog } from '../components/dialog.tsx';
import { classNames } from '../lib/class-names.ts';
import { anchorOf } from '../drawing/routing/anchors.ts';
import type { Design, ElementRef } from '../engine/model/design.ts';
import { useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import { kindOf, nameOf } from '../workspace/operations/name-of.ts';
import { setSearching, useDesk } from './desk-state.ts';
import { useDrawn } from './geometry-context.tsx';
import { useView } from './use-view.ts';

interface Found {
  readonly ref: ElementRef;
  readonly name: string;
  readonly kind: string;
  readonly detail: string;
}

const searched = [
  'sites',
  'devices',
  'endpoints',
  'tunnels',
  'associations',
  'transports',
  'segments',
  'forwarders',
  'links',
  'notes',
] as const;

const detailOf = (design: Design, ref: ElementRef): string => {
  switch (ref.collection) {
    case 'devices': {
      const device = design.devices[ref.id]!;
      return [design.sites[device.site]?.name, ...(device.kind === 'host' ? (device.addresses ?? []) : [])]
        .filter(Boolean)
        .join(', ');
    }
    case 'endpoints': {
      const endpoint = design.endpoints[ref.id]!;
      return [endpoint.ipv4, endpoint.ipv6].filter(Boolean).join(', ');
    }
    case 'tunnels': {
      const { a, b } = design.tunnels[ref.id]!;
      return `VNI ${a.vni ?? '?'}${a.vni === b.vni ? '' : ` and ${b.vni ?? '?'}`}`;
    }
    case 'links': {
      const link = design.links[ref.id]!;
      return link.kind === 'landing' ? [link.ipv4, link.ipv6].filter(Boolean).join(', ') : '';
    }
    case 'segments':
      return [
        ...new Set(
          Object.values(design.segments[ref.id]!.sites).flatMap((at) => [
            at.vlan === undefined ? undefined : `VLAN ${at.vlan}`,
            ...(at.subnets ?? []),
          ]),
        ),
      ]
        .filter(Boolean)
        .join(', ');
    default:
      return '';
  }
};

/** Everything on the sheet whose name, address, VNI or VLAN holds the text; the best matches first. */
export const findParts = (design: Design, text: string): readonly Found[] => {
  const wanted = text.trim().toLowerCase();
  if (wanted === '') return [];
  const rank = (found: Found): number =>
    found.name.toLowerCase() === wanted ? 0 : found.name.toLowerCase().startsWith(wanted) ? 1 : 2;
  return searched
    .flatMap((collection) =>
      Object.keys(design[collection]).map((id): Found => {
        const ref: ElementRef = { collection, id };
        return { ref, name: nameOf(design, ref), kind: kindOf(design, ref), detail: detailOf(design, ref) };
      }),
    )
    .filter((found) => `${found.name} ${found.detail} ${found.kind}`.toLowerCase().includes(wanted))
    .sort((a, b) => rank(a) - rank(b) || a.name.localeCompare(b.name, 'en', { numeric: true }))
    .slice(0, 40);
};

/** Find something on the sheet and jump there. */
export function FindDialog() {
  const searching = useDesk((state) => state.searching);
  return searching ? <OpenFindDialog /> : null;
}

const focusAtOnce = (input: HTMLInputElement | null): void => input?.focus();

function OpenFindDialog() {
  const open = useOpenDesign();
  const design = useOpenState((state) => state.document);
  const { geometry } = useDrawn();
  const view = useView();
  const [text, setText] = useState('');
  const [at, setAt] = useState(0);
  const found = useMemo(() => findParts(design, text), [design, text]);
  const chosen = Math.min(at, Math.max(0, found.length - 1));
  const go = (one: Found | undefined): void => {
    if (one === undefined) return;
    setSearching(false);
    open.select([one.ref]);
    const anchor = anchorOf(geometry, one.ref);
    if (anchor !== undefined) view.showPoint(anchor);
  };
  const onKeyDown = (event: KeyboardEvent): void => {
    const step = event.key === 'ArrowDown' ? 1 : event.key === 'ArrowUp' ? -1 : 0;
    if (step !== 0) {
      event.preventDefault();
      setAt(Math.max(0, Math.min(found.length - 1, chosen + step)));
    } else if (event.key === 'Enter') {
      event.preventDefault();
      go(found[chosen]);
    }
  };
  return (
    <Dialog open onOpenChange={setSearching} title="Find on the sheet" widthPx={520}>
      <input
        role="combobox"
        aria-expanded={found.length > 0}
        aria-controls="find-results"
        aria-activedescendant={found.length > 0 ? `find-${chosen}` : undefined}
        aria-label="Name, address, VNI or VLAN"
        placeholder="Name, address, VNI or VLAN"
        ref={focusAtOnce}
        className="w-full border border-rule-strong bg-field px-10 py-8 text-value"
        value={text}
        onChange={(event) => {
          setText(event.target.value);
          setAt(0);
        }}
        onKeyDown={onKeyDown}
      />
      <ul id="find-results" role="listbox" aria-label="Found" className="mt-8 max-h-320 overflow-y-auto">
        {found.map((one, i) => (
          // The text field keeps the focus and takes the keys, as a combobox's does.
          // eslint-disable-next-line jsx-a11y/click-events-have-key-events
          <li
            key={`${one.ref.collection} ${one.ref.id}`}
            id={`find-${i}`}
            role="option"
            aria-selected={i === chosen}
            className={classNames(
              'flex cursor-pointer items-baseline gap-10 px-10 py-5',
              i === chosen && 'bg-blue-wash',
            )}
            onPointerEnter={() => setAt(i)}
            onClick={() => go(one)}
          >
            <span className="w-120 shrink-0 text-note text-ink-3">{one.kind}</span>
            <span className="font-medium">{one.name}</span>
            <span className="ml-auto text-note text-ink-2">{one.detail}</span>
          </li>
        ))}
      </ul>
      {text.trim() !== '' && found.length === 0 && (
        <p className="mt-8 text-base text-ink-2">
          Nothing on this sheet is called or numbered “{text.trim()}”.
        </p>
      )}
    </Dialog>
  );
}
