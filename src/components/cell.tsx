import { createContext, use, useId, useState, type ReactNode } from 'react';
import { createPortal } from 'react-dom';
import { classNames } from '../lib/class-names.ts';
import { SeverityShape, type Severity } from './severity-mark.tsx';

/** Where the cells of a grid put what is wrong with them: beneath the grid, so that its rules stay whole. */
const MessagesContext = createContext<HTMLElement | null>(null);

interface CellGridProps {
  /** How many columns of equal width; or a grid template such as '2fr 1fr 1fr'. */
  readonly columns?: number | string;
  readonly className?: string;
  readonly children: ReactNode;
}

/** Cells that share their 1 px rules, as in a drawing's title block. */
export function CellGrid({ columns = 1, className, children }: CellGridProps) {
  const [messages, setMessages] = useState<HTMLElement | null>(null);
  const template = typeof columns === 'number' ? `repeat(${columns}, minmax(0, 1fr))` : columns;
  return (
    <MessagesContext value={messages}>
      <div className={className}>
        <div className="grid pt-px pl-px" style={{ gridTemplateColumns: template }}>
          {children}
        </div>
        <div ref={setMessages} />
      </div>
    </MessagesContext>
  );
}

export interface CellProps {
  readonly label: string;
  /** Where the value stands, said to screen readers where two cells side by side have one label. */
  readonly place?: string;
  /** What has the value, said so where that is no place. */
  readonly subject?: string;
  /** How many columns of its grid the cell takes. */
  readonly span?: number;
  /** Right-aligned, as the far end's cells in a mirror. */
  readonly alignRight?: boolean;
  readonly className?: string;
}

const cellBase = 'relative -mt-px -ml-px flex min-w-0 flex-col border px-9 pt-4 pb-5';

/** Columns are counted where the design is, so the width of a cell is a style and not a class. */
const spanStyle = (span: number | undefined) =>
  span === undefined || span === 1 ? undefined : { gridColumn: `span ${span}` };

function CellLabel({ label, place, subject }: Pick<CellProps, 'label' | 'place' | 'subject'>) {
  return (
    <span className="block text-label text-ink-3">
      {label}
      {place !== undefined && <span className="sr-only"> at {place}</span>}
      {subject !== undefined && <span className="sr-only"> of {subject}</span>}
    </span>
  );
}

/** What a check says about a value that may stand as it is. */
export interface CellMark {
  readonly severity: Severity;
  readonly sentence: string;
}

/** How a marked value is written. */
export const markInks: Readonly<Record<Severity, string>> = {
  blocking: 'font-semibold text-red',
  degrading: 'font-semibold text-degr',
  advisory: 'font-semibold text-advi',
};

const markOutlines: Readonly<Record<Severity, string>> = {
  blocking: 'outline-red',
  degrading: 'outline-degr',
  advisory: 'outline-advi',
};

const markOutline = (mark: CellMark): string =>
  `z-1 outline-2 -outline-offset-2 ${markOutlines[mark.severity]}`;

/** A value that is read here and changed elsewhere, or computed. */
export function ReadCell({
  label,
  place,
  subject,
  span,
  alignRight = false,
  className,
  marked,
  children,
}: CellProps & { readonly marked?: CellMark; readonly children: ReactNode }) {
  return (
    <div
      title={marked?.sentence}
      style={spanStyle(span)}
      className={classNames(
        cellBase,
        'border-rule-strong bg-raise',
        marked && markOutline(marked),
        alignRight && 'text-right',
        className,
      )}
    >
      <CellLabel {...{ label, place, subject }} />
      <div
        className={classNames(
          'min-h-18 text-value break-words',
          marked ? markInks[marked.severity] : 'text-ink',
        )}
      >
        {children}
        {marked !== undefined && <span className="sr-only">. {marked.sentence}</span>}
      </div>
    </div>
  );
}

/** A ruled cell without a label, for what isn't a value: buttons, a picture. */
export function PlainCell({
  span,
  className,
  children,
}: Pick<CellProps, 'span' | 'className'> & { readonly children: ReactNode }) {
  return (
    <div style={spanStyle(span)} className={classNames(cellBase, 'border-rule-strong', className)}>
      {children}
    </div>
  );
}

export interface FieldCellProps extends CellProps {
  /** What is wrong: field, value and way out in one sentence. */
  readonly error?: string;
  /** Outlines the cell in its severity's colour; the sentence is said on hover and to screen readers. */
  readonly marked?: CellMark;
  /** What the value stands for, said beneath the cell while nothing is wrong. */
  readonly hint?: string;
  /** Stands after the value, such as a unit or a small link. */
  readonly after?: ReactNode;
}

interface FieldIds {
  readonly id: string;
  readonly describedBy: string | undefined;
}

/** Presses on words and signs beside a control fall through to the label behind them. */
const throughToLabel =
  'pointer-events-none relative z-1 [&_a]:pointer-events-auto [&_button]:pointer-events-auto [&_input]:pointer-events-auto [&_select]:pointer-events-auto [&_textarea]:pointer-events-auto';

/** The frame of a cell that can be typed into or chosen in: label, value, and what is wrong beneath. */
export function FieldCell({
  label,
  place,
  subject,
  span,
  alignRight = false,
  className,
  error,
  marked,
  hint,
  after,
  disabled = false,
  group = false,
  children,
}: FieldCellProps & {
  readonly disabled?: boolean;
  /** Several controls under one label: the frame is then a group and not a label. */
  readonly group?: boolean;
  readonly children: (ids: FieldIds) => ReactNode;
}) {
  const id = useId();
  const messageId = `${id}-message`;
  const inGrid = use(MessagesContext);
  const faulty = error !== undefined && error !== '';
  const markId = `${id}-mark`;
  const describedBy =
    classNames(marked !== undefined && markId, (faulty || hint !== undefined) && messageId) || undefined;
  const message = faulty ? (
    <FieldError id={messageId}>{error}</FieldError>
  ) : hint !== undefined ? (
    <p id={messageId} className="mt-5 text-note text-ink-3">
      {hint}
    </p>
  ) : null;
  const content = (
    <>
      {group ? (
        <span id={`${id}-label`}>
          <CellLabel {...{ label, place, subject }} />
        </span>
      ) : (
        // Spread over the whole cell, which therefore takes a press for its control.
        <label htmlFor={id} className="after:absolute after:inset-0">
          <CellLabel {...{ label, place, subject }} />
        </label>
      )}
      <span
        className={classNames(
          'flex min-h-18 items-center gap-8',
          !group && throughToLabel,
          alignRight && 'justify-end',
        )}
      >
        {children({ id, describedBy })}
        {after}
      </span>
    </>
  );
  const look = classNames(
    cellBase,
    disabled ? 'border-rule-strong bg-raise' : 'border-rule-strong bg-field',
    !group &&
      'focus-within:z-1 focus-within:outline-2 focus-within:-outline-offset-2 focus-within:outline-blue',
    faulty ? 'z-1 outline-2 -outline-offset-2 outline-red' : marked && markOutline(marked),
    alignRight && 'text-right',
    className,
  );
  return (
    <>
      <div
        {...(group
          ? { role: 'group', 'aria-labelledby': `${id}-label`, 'aria-describedby': describedBy }
          : {})}
        title={marked?.sentence}
        style={spanStyle(span)}
        className={look}
      >
        {content}
      </div>
      {marked !== undefined && (
        <span id={markId} hidden>
          {marked.sentence}
        </span>
      )}
      {message !== null && (inGrid === null ? message : createPortal(message, inGrid))}
    </>
  );
}

/** Octagon and sentence beneath a cell: field, value, way out. */
export function FieldError({ id, children }: { readonly id?: string; readonly children: ReactNode }) {
  return (
    <p id={id} role="alert" className="mt-6 flex items-start gap-6 text-base text-red">
      <span className="mt-3">
        <SeverityShape severity="blocking" size={12} />
      </span>
      {children}
    </p>
  );
}
