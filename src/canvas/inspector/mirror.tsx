import { createContext, use, type ReactNode } from 'react';
import { CellGrid } from '../../components/cell.tsx';
import { classNames } from '../../lib/class-names.ts';
import { sameJson } from '../../engine/model/merge-patch.ts';
import { ends, type End } from '../../engine/network/network.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { markAt, type FieldPath } from './field-marks.ts';
import { useAt } from './use-field.ts';

/** What stands at either end. */
export interface EndHead {
  /** What the end is called in labels and messages: its site, or its device where both stand at one site. */
  readonly place: string;
  readonly device: string;
}
type Heads = { readonly [E in End]: EndHead };

const MirrorContext = createContext<{ readonly entry: FieldPath; readonly heads: Heads } | null>(null);

const useMirror = () => {
  const mirror = use(MirrorContext);
  if (mirror === null) throw new Error('A row of a mirror stands outside it.');
  return mirror;
};

/** Both ends of an element side by side, with a rail between them that says where they agree. */
export function Mirror({
  label,
  entry,
  heads,
  children,
}: {
  readonly label: string;
  /** Path of the entry whose `a` and `b` are the ends. */
  readonly entry: FieldPath;
  readonly heads: Heads;
  readonly children: ReactNode;
}) {
  return (
    <MirrorContext value={{ entry, heads }}>
      <div role="group" aria-label={label}>
        <CellGrid columns="minmax(0, 1fr) 32px minmax(0, 1fr)">
          <div
            className="-mt-px -ml-px flex justify-between gap-12 bg-strip px-9 py-6 text-strip-ink"
            style={{ gridColumn: 'span 3' }}
          >
            {ends.map((end) => (
              <div key={end} className={classNames('min-w-0 flex-1', end === 'b' && 'text-right')}>
                <div className="text-value font-semibold break-words">{heads[end].place}</div>
                <div className="text-note break-words opacity-85">{heads[end].device}</div>
              </div>
            ))}
          </div>
          {children}
        </CellGrid>
      </div>
    </MirrorContext>
  );
}

export type Agreement = 'same' | 'differ' | 'unknown';

const railLook = '-mt-px -ml-px flex items-center justify-center border border-rule-strong bg-panel';

/** The cell between the ends: =, ≠ (red where the ends must agree), or nothing to compare. */
export function Rail({
  agreement,
  fault = false,
}: {
  readonly agreement: Agreement;
  readonly fault?: boolean;
}) {
  const red = agreement === 'differ' && fault;
  return (
    <div
      className={classNames(
        red
          ? 'z-2 -mt-px -ml-px flex items-center justify-center border border-red bg-red text-red-ink'
          : railLook,
        'text-section font-semibold',
        !red && 'text-ink-2',
      )}
    >
      {agreement !== 'unknown' && (
        <>
          <span aria-hidden="true">{agreement === 'same' ? '=' : '≠'}</span>
          <span className="sr-only">{agreement === 'same' ? 'same at both ends' : 'the ends differ'}</span>
        </>
      )}
    </div>
  );
}

/** The rail beside two rows where this end's value is the far end's far value. */
export function CrossingRail() {
  return (
    <div className={classNames(railLook, 'relative')} style={{ gridRow: 'span 2' }}>
      <svg
        role="img"
        aria-label="This end's value is the other's far value"
        viewBox="0 0 32 100"
        preserveAspectRatio="none"
        className="absolute inset-0 size-full"
      >
        {['M0 28C18 28 14 72 32 72', 'M0 72C18 72 14 28 32 28'].map((d) => (
          <path
            key={d}
            d={d}
            fill="none"
            stroke="var(--ink)"
            strokeWidth="1.2"
            vectorEffect="non-scaling-stroke"
          />
        ))}
      </svg>
    </div>
  );
}

/** What a row hands to the cell at one end. */
export interface EndCell {
  readonly end: End;
  readonly path: FieldPath;
  readonly place: string;
  readonly alignRight: boolean;
}

/** The cell of one end, ready to be spread into a field. */
export const useEndCell = (field: FieldPath): ((end: End) => EndCell) => {
  const { entry, heads } = useMirror();
  return (end) => ({
    end,
    path: [...entry, end, ...field],
    place: heads[end].place,
    alignRight: end === 'b',
  });
};

interface MirrorRowProps {
  /** Path of the field below an end. */
  readonly field: FieldPath;
  /** Whether the ends have to agree, had better, or are different by nature. */
  readonly agree: 'must' | 'should' | 'free';
  /** What an absent value stands for, where that is known. */
  readonly assumed?: unknown;
  readonly children: (cell: EndCell) => ReactNode;
}

/** One field at both ends. */
export function MirrorRow({ field, agree, assumed, children }: MirrorRowProps) {
  const { entry } = useMirror();
  const cellAt = useEndCell(field);
  const { openFindings } = useChecks();
  const a = useAt([...entry, 'a', ...field]) ?? assumed;
  const b = useAt([...entry, 'b', ...field]) ?? assumed;
  const isMarked = ends.some((end) => markAt(openFindings, cellAt(end).path)?.severity === 'blocking');
  const agreement: Agreement =
    agree === 'free' || a === undefined || b === undefined ? 'unknown' : sameJson(a, b) ? 'same' : 'differ';
  return (
    <>
      {children(cellAt('a'))}
      <Rail agreement={agreement} fault={agree === 'must' || isMarked} />
      {children(cellAt('b'))}
    </>
  );
}
