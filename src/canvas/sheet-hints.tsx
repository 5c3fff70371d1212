import { useOpenState } from '../workspace/open-design-context.tsx';
import { useDesk } from './desk-state.ts';
import { useDrawn } from './geometry-context.tsx';
import type { TrayPart } from './place-part.ts';

/** Said while cords found no way or no room where things stand now. */
export function CrowdedNotice() {
  const { settled } = useDrawn();
  const editable = useOpenState((state) => state.editable);
  const tight = settled.crowded.filter((entry) => entry.what !== 'text').length;
  if (tight === 0) return null;
  return (
    <p className="crowded-notice" role="status">
      {tight === 1 ? 'One line finds no room here.' : `${tight} lines find no room here.`}
      {editable && ' Move things apart, or let Tidy lay the sheet out.'}
    </p>
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
        ? 'The sheet as this fix would leave it.'
        : undefined;
  return hint === undefined ? null : (
    <p className="sheet-hint" role="status">
      {hint}
    </p>
  );
}
