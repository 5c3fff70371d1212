import { useEffect, useMemo, useRef, useState, type KeyboardEvent } from 'react';
import { Button } from '../components/button.tsx';
import { Dialog } from '../components/dialog.tsx';
import { classNames } from '../lib/class-names.ts';
import type { Design, ElementRef } from '../engine/model/design.ts';
import { useOpenState } from '../workspace/open-design-context.tsx';
import { kindOf, nameOf } from '../workspace/operations/name-of.ts';
import { setListingKeys, setSearching, useDesk } from './desk-state.ts';
import type { NamedCommand } from './named-command.ts';

interface FoundPart {
  readonly ref: ElementRef;
  readonly name: string;
  readonly kind: string;
  readonly detail: string;
}
type Found = FoundPart | NamedCommand;

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

const most = 40;
const rankOf = ({ name }: Found, wanted: string): number =>
  name.toLowerCase() === wanted ? 0 : name.toLowerCase().startsWith(wanted) ? 1 : 2;

/** The commands whose name or group holds every word of the text; all of them for none. */
export const findCommands = (commands: readonly NamedCommand[], text: string): readonly NamedCommand[] => {
  const words = text.trim().toLowerCase().split(/\s+/).filter(Boolean);
  return commands.filter(({ name, kind }) =>
    words.every((word) => `${name} ${kind}`.toLowerCase().includes(word)),
  );
};

/** Everything on the sheet whose name, address, VNI or VLAN holds the text; the best matches first. */
export const findParts = (design: Design, text: string): readonly FoundPart[] => {
  const wanted = text.trim().toLowerCase();
  if (wanted === '') return [];
  return searched
    .flatMap((collection) =>
      Object.keys(design[collection]).map((id): FoundPart => {
        const ref: ElementRef = { collection, id };
        return { ref, name: nameOf(design, ref), kind: kindOf(design, ref), detail: detailOf(design, ref) };
      }),
    )
    .filter((found) => `${found.name} ${found.detail} ${found.kind}`.toLowerCase().includes(wanted))
    .sort(
      (a, b) =>
        rankOf(a, wanted) - rankOf(b, wanted) || a.name.localeCompare(b.name, 'en', { numeric: true }),
    )
    .slice(0, most);
};

interface FindDialogProps {
  /** Where one gets from here: pages, other designs. */
  readonly destinations: readonly NamedCommand[];
  /** Shows an element where the page itself has no place for it. */
  readonly onGoTo: (ref: ElementRef) => void;
}

/** Find an element and go there, go to another page or design, or do something by its name. */
export function FindDialog(props: FindDialogProps) {
  const searching = useDesk((state) => state.searching);
  return searching ? <OpenFindDialog {...props} /> : null;
}

const focusAtOnce = (input: HTMLInputElement | null): void => input?.focus();
const noCommands: readonly NamedCommand[] = [];

function OpenFindDialog({ destinations, onGoTo }: FindDialogProps) {
  const design = useOpenState((state) => state.document);
  const offered = useDesk((state) => state.offered);
  const commands = offered?.commands ?? noCommands;
  const [text, setText] = useState('');
  const [at, setAt] = useState(0);
  const possible = useMemo(() => [...commands, ...destinations], [commands, destinations]);
  const found = useMemo((): readonly Found[] => {
    const wanted = text.trim().toLowerCase();
    const parts = findParts(design, text);
    const named = findCommands(possible, text);
    // An element that is called so before a command that is, and both before what only holds the words.
    return [...parts, ...named]
      .map((one, i) => ({ one, rank: wanted === '' ? 0 : rankOf(one, wanted), i }))
      .sort((a, b) => a.rank - b.rank || a.i - b.i)
      .map(({ one }) => one);
  }, [design, text, possible]);
  const chosen = Math.min(at, Math.max(0, found.length - 1));
  const list = useRef<HTMLUListElement>(null);
  useEffect(() => {
    list.current?.children[chosen]?.scrollIntoView?.({ block: 'nearest' });
  }, [chosen, found]);
  // Done once the dialog has closed and the focus is back where it was: what is done may move it.
  const doAfter = (run: () => void): void => {
    setSearching(false);
    setTimeout(run);
  };
  const go = (one: Found | undefined): void => {
    if (one === undefined) return;
    if ('run' in one) return doAfter(one.run);
    setSearching(false);
    (offered?.goTo ?? onGoTo)(one.ref);
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
    <Dialog
      open
      onOpenChange={setSearching}
      title="Find or do"
      widthPx={560}
      footer={<Button onClick={() => doAfter(() => setListingKeys(true))}>All keys</Button>}
    >
      <input
        role="combobox"
        aria-expanded={found.length > 0}
        aria-controls="find-results"
        aria-activedescendant={found.length > 0 ? `find-${chosen}` : undefined}
        aria-label="Name, address, VNI, VLAN, page or command"
        placeholder="Name, address, VNI, VLAN, page or command"
        autoComplete="off"
        spellCheck={false}
        ref={focusAtOnce}
        className="w-full border border-rule-strong bg-field px-10 py-8 text-value"
        value={text}
        onChange={(event) => {
          setText(event.target.value);
          setAt(0);
        }}
        onKeyDown={onKeyDown}
      />
      <ul
        id="find-results"
        ref={list}
        role="listbox"
        aria-label="Found"
        className="mt-8 max-h-[min(44vh,360px)] overflow-y-auto"
      >
        {found.map((one, i) => (
          // The text field keeps the focus and takes the keys, as a combobox's does.
          // eslint-disable-next-line jsx-a11y/click-events-have-key-events
          <li
            key={
              'run' in one ? `${one.kind} ${one.name} ${one.detail}` : `${one.ref.collection} ${one.ref.id}`
            }
            id={`find-${i}`}
            role="option"
            aria-selected={i === chosen}
            className={classNames(
              'flex cursor-pointer items-baseline gap-10 px-10 py-5',
              i === chosen && 'bg-blue-wash',
            )}
            onPointerMove={() => i !== chosen && setAt(i)}
            onClick={() => go(one)}
          >
            <span className="w-120 shrink-0 text-note text-ink-3">{one.kind}</span>
            <span className={'run' in one ? undefined : 'font-medium'}>{one.name}</span>
            <span className="ml-auto shrink-0 pl-8 text-note text-ink-2">{one.detail}</span>
          </li>
        ))}
      </ul>
      {found.length === 0 && (
        <p className="mt-8 text-base text-ink-2">
          Nothing in this design is called or numbered “{text.trim()}”, and no page, design or command.
        </p>
      )}
    </Dialog>
  );
}
