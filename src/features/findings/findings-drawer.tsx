import { useState, type KeyboardEvent, type PointerEvent, type ReactNode } from 'react';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';

interface FindingsDrawerProps {
  readonly count: number;
  /** How many there are of each severity, at the right of the drawer's edge. */
  readonly counts: ReactNode;
  readonly children: ReactNode;
}

const least = 96;
const most = 520;
const usual = 180;

/** The drawer under the sheet. Its edge stays in view when it is shut and can be dragged, or moved by arrow keys. */
export function FindingsDrawer({ count, counts, children }: FindingsDrawerProps) {
  // With nothing to say at first it leaves its room to the sheet.
  const [open, setOpen] = useState(count > 0);
  const [height, setHeight] = useState(usual);
  const resize = (next: number): void => setHeight(Math.max(least, Math.min(most, next)));
  const onKeyDown = (event: KeyboardEvent): void => {
    const step = event.key === 'ArrowUp' ? 24 : event.key === 'ArrowDown' ? -24 : 0;
    if (step === 0) return;
    event.preventDefault();
    resize(height + step);
  };
  const onPointerMove = (event: PointerEvent): void => {
    if (event.buttons === 1) resize(height - event.movementY);
  };
  return (
    <section aria-label="Findings" className="shrink-0 border-t-1.5 border-ink bg-panel">
      {open && (
        // A separator that can be focused is the pattern's own role for a movable edge.
        // eslint-disable-next-line jsx-a11y/no-noninteractive-element-interactions
        <div
          role="separator"
          aria-orientation="horizontal"
          aria-label="Height of the drawer"
          aria-valuenow={height}
          aria-valuemin={least}
          aria-valuemax={most}
          // eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex
          tabIndex={0}
          className="absolute -mt-4 h-8 w-full max-w-full cursor-ns-resize touch-none"
          style={{ position: 'relative', marginBottom: -4 }}
          onKeyDown={onKeyDown}
          onPointerDown={(event) => event.currentTarget.setPointerCapture(event.pointerId)}
          onPointerMove={onPointerMove}
        />
      )}
      <div className="flex h-35 items-stretch">
        <h2 className="flex items-center gap-8 border-r border-rule-2 px-14 text-base font-semibold">
          Findings <span>{count}</span>
        </h2>
        <div className="ml-auto flex items-center gap-16 pr-8 pl-14 text-base max-md:hidden">{counts}</div>
        <Button
          kind="quiet"
          iconOnly
          className="self-center max-md:ml-auto"
          aria-expanded={open}
          aria-label={open ? 'Shut the drawer' : 'Open the drawer'}
          icon={<Icon name={open ? 'chevron-down' : 'chevron-up'} />}
          onClick={() => setOpen(!open)}
        />
      </div>
      {open && (
        <div className="overflow-y-auto border-t border-rule-2" style={{ height }}>
          {children}
        </div>
      )}
    </section>
  );
}
