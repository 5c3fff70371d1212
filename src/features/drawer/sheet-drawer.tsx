import { useState, type KeyboardEvent, type PointerEvent, type ReactNode } from 'react';
import type { DrawerTab } from '../../canvas/desk-tab.ts';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { TabPanel, Tabs } from '../../components/tabs.tsx';

interface SheetDrawerProps {
  readonly tabs: readonly DrawerTab[];
  /** The tab that is open, or was when the drawer was shut. */
  readonly value: string;
  readonly onChange: (value: string) => void;
  readonly openAtFirst: boolean;
  /** What of a tab the address asks for; a change of it opens the drawer. */
  readonly asked?: string;
  /** How many findings there are of each severity, at the right of the drawer's edge. */
  readonly counts: ReactNode;
}

const leastPx = 96;
const mostPx = 520;

/**
 * The drawer under the sheet, a tab for each thing in it. Its edge stays in view when it is shut and can be dragged, or
 * moved by arrow keys; each tab keeps the height it was given.
 */
export function SheetDrawer({ tabs, value, onChange, openAtFirst, asked = '', counts }: SheetDrawerProps) {
  const [isOpen, setOpen] = useState(openAtFirst);
  const [answered, setAnswered] = useState(asked);
  if (asked !== answered) {
    setAnswered(asked);
    setOpen(true);
  }
  const [heights, setHeights] = useState<Readonly<Record<string, number>>>({});
  const heightPx = heights[value] ?? tabs.find((tab) => tab.value === value)?.usualHeightPx ?? leastPx;
  const resize = (next: number): void =>
    setHeights({ ...heights, [value]: Math.max(leastPx, Math.min(mostPx, next)) });
  const onKeyDown = (event: KeyboardEvent): void => {
    const step = event.key === 'ArrowUp' ? 24 : event.key === 'ArrowDown' ? -24 : 0;
    if (step === 0) return;
    event.preventDefault();
    resize(heightPx + step);
  };
  const onPointerMove = (event: PointerEvent): void => {
    if (event.buttons === 1) resize(heightPx - event.movementY);
  };
  return (
    <section aria-label="Drawer" className="shrink-0 border-t-1.5 border-ink bg-panel">
      {isOpen && (
        // A separator that can be focused is the pattern's own role for a movable edge.
        // eslint-disable-next-line jsx-a11y/no-noninteractive-element-interactions
        <div
          role="separator"
          aria-orientation="horizontal"
          aria-label="Height of the drawer"
          aria-valuenow={heightPx}
          aria-valuemin={leastPx}
          aria-valuemax={mostPx}
          // eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex
          tabIndex={0}
          className="absolute -mt-4 h-8 w-full max-w-full cursor-ns-resize touch-none"
          style={{ position: 'relative', marginBottom: -4 }}
          onKeyDown={onKeyDown}
          onPointerDown={(event) => event.currentTarget.setPointerCapture(event.pointerId)}
          onPointerMove={onPointerMove}
        />
      )}
      <Tabs
        label="Drawer"
        tabs={tabs}
        // While it is shut no tab is open, so that a press on any opens it.
        value={isOpen ? value : ''}
        onChange={(next) => {
          setOpen(true);
          onChange(next);
        }}
        trailing={
          <>
            <span className="flex items-center gap-16 text-base max-md:hidden">{counts}</span>
            <Button
              kind="quiet"
              iconOnly
              aria-expanded={isOpen}
              aria-label={isOpen ? 'Shut the drawer' : 'Open the drawer'}
              icon={<Icon name={isOpen ? 'chevron-down' : 'chevron-up'} />}
              onClick={() => setOpen(!isOpen)}
            />
          </>
        }
      >
        {isOpen &&
          tabs.map((tab) => (
            <TabPanel key={tab.value} value={tab.value}>
              <div className="overflow-y-auto max-md:max-h-[46dvh]" style={{ height: heightPx }}>
                {tab.panel}
              </div>
            </TabPanel>
          ))}
      </Tabs>
    </section>
  );
}
