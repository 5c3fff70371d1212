import { useRef, type ReactNode } from 'react';
import { Button } from '../../components/button.tsx';
import { classNames } from '../../lib/class-names.ts';
import { stretchForm } from '../../lib/stretch-address.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { Icon } from '../../components/icon.tsx';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import { showToast } from '../../components/toast.tsx';
import { Tooltip } from '../../components/tooltip.tsx';
import { useNumbering } from '../../workspace/checks-context.tsx';
import { newEntryId, perform, useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { placeSegment } from '../../workspace/operations/place-parts.ts';
import { keyWords, type ShortcutId } from '../commands/shortcuts.ts';
import { askToJoin, editNote, setSearching, setTool, startPlacing, useDesk } from '../desk-state.ts';
import { useDrawn } from '../geometry-context.tsx';
import { freePlace, isJoining, placePart, type TrayPart } from '../place-part.ts';
import { useViewChoice } from '../use-view-choice.ts';
import { useView } from '../use-view.ts';
import { writePartDrag } from './part-drag.ts';
import { PartTile } from './part-tile.tsx';
import { ViewControls } from './view-controls.tsx';

const groups: readonly {
  readonly title: string;
  readonly parts: readonly (readonly [TrayPart, string])[];
}[] = [
  {
    title: 'Devices',
    parts: [
      ['firewall', 'Firewall'],
      ['ha-pair', 'HA pair'],
      ['switch', 'Switch'],
      ['router', 'Router'],
      ['host', 'Host'],
    ],
  },
  {
    title: 'Overlay',
    parts: [
      ['endpoint', 'Endpoint'],
      ['tunnel', 'Tunnel'],
      ['association', 'Association'],
    ],
  },
  {
    title: 'Ground',
    parts: [
      ['site', 'Site'],
      ['transport', 'Transport'],
      ['cable', 'Cable'],
      ['note', 'Note'],
    ],
  },
];

/** What the sheet is put together from, and the tools and the view over it. */
export function PartsTray() {
  const editable = useOpenState((state) => state.editable);
  return (
    <aside aria-label="Parts" className="parts-tray">
      <Tools editable={editable} />
      <div className="min-h-0 flex-1 overflow-y-auto">
        {editable && groups.map((group) => <PartGroup key={group.title} {...group} />)}
        <Segments editable={editable} />
      </div>
      {editable && <StretchButton />}
      <ViewControls />
    </aside>
  );
}

const withKey = (words: string, id: ShortcutId): string => `${words} (${keyWords(id)})`;

function StretchButton() {
  const { change } = useSearchValues();
  return (
    <div className="border-t border-rule-2 p-12">
      <Button className="w-full" onClick={() => change({ stretch: stretchForm })}>
        Stretch…
      </Button>
    </div>
  );
}

function Tools({ editable }: { readonly editable: boolean }) {
  const tool = useDesk((state) => state.tool);
  const placing = useDesk((state) => state.placing);
  return (
    <div role="toolbar" aria-label="Tools" className="flex gap-4 border-b border-rule-2 px-10 py-8">
      <Tooltip text={withKey('Select and move', 'select')}>
        <Button
          kind="quiet"
          iconOnly
          pressed={tool === 'select' && placing === undefined}
          aria-label="Select and move"
          icon={<Icon name="pointer" />}
          onClick={() => setTool('select')}
        />
      </Tooltip>
      <Tooltip text={`Move the sheet (${keyWords('pan')}, or hold ${keyWords('panHeld')})`}>
        <Button
          kind="quiet"
          iconOnly
          pressed={tool === 'pan'}
          aria-label="Move the sheet"
          icon={<Icon name="move" />}
          onClick={() => setTool('pan')}
        />
      </Tooltip>
      <Tooltip text={withKey('Find or do', 'find')}>
        <Button
          kind="quiet"
          iconOnly
          aria-label="Find or do"
          icon={<Icon name="search" />}
          onClick={() => setSearching(true)}
        />
      </Tooltip>
      {editable && (
        <Tooltip text={withKey('Put a note down', 'note')}>
          <Button
            kind="quiet"
            iconOnly
            pressed={placing === 'note'}
            aria-label="Put a note down"
            icon={<Icon name="pin" />}
            onClick={() => startPlacing('note')}
          />
        </Tooltip>
      )}
    </div>
  );
}

function GroupTitle({ children, action }: { readonly children: ReactNode; readonly action?: ReactNode }) {
  return (
    <div className="flex items-center justify-between px-12 pt-10 pb-4">
      <h2 className="text-note font-semibold text-ink-2">{children}</h2>
      {action}
    </div>
  );
}

function PartGroup({ title, parts }: (typeof groups)[number]) {
  return (
    <section>
      <GroupTitle>{title}</GroupTitle>
      <ul>
        {parts.map(([part, name]) => (
          <li key={part}>
            <PartButton part={part} name={name} />
          </li>
        ))}
      </ul>
    </section>
  );
}

/** Dragged onto the sheet, clicked and put down with the next click, or placed at once by the keyboard. */
function PartButton({ part, name }: { readonly part: TrayPart; readonly name: string }) {
  const open = useOpenDesign();
  const numbering = useNumbering();
  const { settled } = useDrawn();
  const view = useView();
  const placing = useDesk((state) => state.placing);
  const byPointer = useRef(false);

  const placeNow = (): void => {
    if (isJoining(part)) return askToJoin({ kind: part });
    const { document, selection } = open.store.getState();
    const first = selection[0];
    const site =
      first?.collection === 'sites'
        ? first.id
        : first?.collection === 'devices'
          ? document.devices[first.id]?.site
          : undefined;
    const at = freePlace(document, settled, part, site, view.middle());
    const done = perform(open, placePart(document, settled, part, at, newEntryId, numbering, site));
    if (!done.ok) showToast({ tone: 'failed', text: done.why });
    else {
      view.showPoint(at);
      if (part === 'note') editNote(open.store.getState().selection[0]?.id, true);
    }
  };

  return (
    <button
      type="button"
      draggable={!isJoining(part)}
      aria-pressed={placing === part}
      className={classNames('part-button', placing === part && 'part-button-taken')}
      onPointerDown={() => (byPointer.current = true)}
      onKeyDown={() => (byPointer.current = false)}
      onClick={() => (byPointer.current ? startPlacing(placing === part ? undefined : part) : placeNow())}
      onDragStart={(event) => writePartDrag(event.dataTransfer, part)}
    >
      <PartTile part={part} />
      {name}
    </button>
  );
}

function Segments({ editable }: { readonly editable: boolean }) {
  const open = useOpenDesign();
  const numbering = useNumbering();
  const segments = useOpenState((state) => state.document.segments);
  const selection = useOpenState((state) => state.selection);
  const { choice, toggleSegment } = useViewChoice();
  const isHidden = (id: string): boolean => choice.segments?.includes(id) === false;
  const inOrder = Object.entries(segments).sort(
    ([, a], [, b]) => a.letter.length - b.letter.length || (a.letter < b.letter ? -1 : 1),
  );
  return (
    <section>
      <GroupTitle
        action={
          editable && (
            <Button
              kind="quiet"
              small
              iconOnly
              aria-label="Add a segment"
              icon={<Icon name="plus" size={14} />}
              onClick={() =>
                perform(open, placeSegment(open.store.getState().document, newEntryId, numbering))
              }
            />
          )
        }
      >
        Segments
      </GroupTitle>
      {inOrder.length === 0 && (
        <p className="px-12 pb-8 text-note text-ink-3">
          None yet. A segment is a VLAN that is to reach several sites.
        </p>
      )}
      <ul>
        {inOrder.map(([id, segment]) => (
          <li key={id} className="flex items-center">
            <button
              type="button"
              aria-pressed={selection.some((ref) => ref.collection === 'segments' && ref.id === id)}
              className="part-button min-w-0 flex-1"
              onClick={() => open.select([{ collection: 'segments', id }])}
            >
              <SegmentSwatch letter={segment.letter} squarePx={16} cordPx={0} />
              <span className="truncate">{segment.name}</span>
            </button>
            <button
              type="button"
              className="mr-6 flex size-24 items-center justify-center text-ink-3 hover:text-ink"
              aria-pressed={isHidden(id)}
              aria-label={isHidden(id) ? `Show ${segment.name}` : `Fade ${segment.name}`}
              onClick={() => toggleSegment(id)}
            >
              <Icon name={isHidden(id) ? 'eye-shut' : 'eye'} size={15} />
            </button>
          </li>
        ))}
      </ul>
    </section>
  );
}
