import { Button } from '../components/button.tsx';
import { EmptyState, UncabledPicture } from '../components/empty-state.tsx';
import { crowdedWords } from '../drawing/parts/crowded-words.ts';
import { viewLayers } from '../drawing/view-layers.ts';
import { stretchForm } from '../lib/stretch-address.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { useOpenState } from '../workspace/open-design-context.tsx';
import { useDesk } from './desk-state.ts';
import { useDrawn } from './geometry-context.tsx';
import type { TrayPart } from './place-part.ts';
import { useViewChoice } from './use-view-choice.ts';

/** Said while something finds no way or no room where things stand now; words without room are the least of it. */
export function CrowdedNotice() {
  const { settled, facts } = useDrawn();
  const editable = useOpenState((state) => state.editable);
  const [first, ...others] = settled.crowded.filter((entry) => entry.what !== 'text');
  if (first === undefined) return null;
  return (
    <p className="crowded-notice" role="status">
      {crowdedWords(first, facts)}
      {others.length > 0 && ` And ${others.length} more.`}
      {editable && ' Tidy lays the sheet out.'}
    </p>
  );
}

/** What an empty sheet is for, and the two ways to begin. */
export function EmptySheetHint() {
  const { change } = useSearchValues();
  const editable = useOpenState((state) => state.editable);
  const isEmpty = useOpenState(
    ({ document }) => Object.keys(document.sites).length + Object.keys(document.transports).length === 0,
  );
  const placing = useDesk((state) => state.placing);
  if (!editable || !isEmpty || placing !== undefined) return null;
  return (
    <div className="empty-sheet-hint">
      <EmptyState
        title="Nothing is on the sheet yet"
        picture={<UncabledPicture />}
        action={
          <Button kind="primary" onClick={() => change({ stretch: stretchForm })}>
            Stretch…
          </Button>
        }
      >
        Drag sites, devices and transports from the tray. Or name your sites and segments, and have a complete
        first design made of them.
      </EmptyState>
    </div>
  );
}

const placingHint = (part: TrayPart, hasFirst: boolean): string => {
  if (part === 'tunnel')
    return hasFirst ? 'Now the ring at the other end. Esc stops.' : 'Pick the ring at one end. Esc stops.';
  if (part === 'association')
    return hasFirst
      ? 'Now the gateway at the other end. Esc stops.'
      : 'Pick the gateway at one end. Esc stops.';
  if (part === 'cable')
    return hasFirst
      ? 'Now the port, device or transport at the other end. Esc stops.'
      : 'Pick a port or a device. Esc stops.';
  if (part === 'endpoint') return 'Click a firewall, an HA pair or a router. Esc stops.';
  return 'Click where it is to stand. Esc stops.';
};

/** What the next click does, or what the sheet shows for the moment. */
export function SheetHint() {
  const placing = useDesk((state) => state.placing);
  const hasFirst = useDesk((state) => state.firstEnd !== undefined);
  const { preview } = useDrawn();
  const hint =
    placing !== undefined
      ? placingHint(placing, hasFirst)
      : preview !== undefined
        ? 'The sheet as this change would leave it.'
        : undefined;
  return hint === undefined ? null : (
    <p className="sheet-hint" role="status">
      {hint}
    </p>
  );
}

/** Says what is left out while not everything is shown, so that nobody takes it for missing. */
export function ViewNotice() {
  const { choice, isWhole, showEverything } = useViewChoice();
  const segments = useOpenState((state) => state.document.segments);
  if (isWhole) return null;
  const off = viewLayers.filter((layer) => !choice.layers.includes(layer));
  const letters = choice.segments?.map((id) => segments[id]?.letter ?? id).sort();
  const only =
    letters === undefined ? [] : [`only segment${letters.length === 1 ? '' : 's'} ${letters.join(', ')}`];
  const without = off.length === 0 ? [] : [`without ${off.join(' and ')}`];
  const words = [...only, ...without].join(', ');
  return (
    <div className="view-notice">
      <p role="status">{`${words.charAt(0).toUpperCase()}${words.slice(1)}`}</p>
      <Button small onClick={showEverything}>
        Show everything
      </Button>
    </div>
  );
}
