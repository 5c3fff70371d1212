import type { ReactNode } from 'react';

interface LabelHolderProps {
  readonly title: ReactNode;
  readonly note?: string;
}

/** A brass label holder, as on a rack or a drawer: brass between two lines of ink, a white card inside. */
export function LabelHolder({ title, note }: LabelHolderProps) {
  return (
    <div className="border border-casing bg-brass p-4">
      <div className="border border-casing bg-plate px-12 py-9">
        <div className="text-section font-semibold break-words text-ink">{title}</div>
        {note !== undefined && note !== '' && <p className="mt-2 text-base break-words text-ink-2">{note}</p>}
      </div>
    </div>
  );
}
