import { Tabs as Primitive } from 'radix-ui';
import type { ReactNode } from 'react';

export interface Tab {
  readonly value: string;
  readonly label: string;
  /** Stands after the label, such as how many findings there are. */
  readonly count?: number;
}

interface TabsProps {
  /** Names the row of tabs to a screen reader. */
  readonly label: string;
  readonly tabs: readonly Tab[];
  readonly value: string;
  readonly onChange: (value: string) => void;
  /** Stands at the right end of the row. */
  readonly trailing?: ReactNode;
  /** One `TabPanel` per tab; none while what they stand in is closed. */
  readonly children?: ReactNode;
  readonly className?: string;
}

/** Tabs in a row 35 px high, parted by rules; the active one has a foot. */
export function Tabs({ label, tabs, value, onChange, trailing, children, className }: TabsProps) {
  return (
    <Primitive.Root value={value} onValueChange={onChange} className={className}>
      <div className="@container/tabs flex h-35 shrink-0 items-stretch border-b border-rule-2 bg-panel">
        <Primitive.List aria-label={label} className="flex min-w-0 items-stretch overflow-x-auto">
          {tabs.map((tab) => (
            <Primitive.Trigger
              key={tab.value}
              value={tab.value}
              className="relative flex items-center gap-8 border-r border-rule-2 px-14 text-base font-medium whitespace-nowrap text-ink-2 -outline-offset-2 hover:bg-hover data-[state=active]:font-semibold data-[state=active]:text-ink data-[state=active]:after:absolute data-[state=active]:after:inset-x-0 data-[state=active]:after:bottom-0 data-[state=active]:after:h-4 data-[state=active]:after:bg-ink"
            >
              {tab.label} {tab.count !== undefined && <span className="font-semibold">{tab.count}</span>}
            </Primitive.Trigger>
          ))}
        </Primitive.List>
        {trailing !== undefined && (
          <div className="ml-auto flex items-center gap-16 pr-8 pl-16">{trailing}</div>
        )}
      </div>
      {children}
    </Primitive.Root>
  );
}

export function TabPanel({
  value,
  children,
  className,
}: {
  readonly value: string;
  readonly children: ReactNode;
  readonly className?: string;
}) {
  return (
    <Primitive.Content value={value} className={className}>
      {children}
    </Primitive.Content>
  );
}
