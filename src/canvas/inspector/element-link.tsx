import type { ButtonHTMLAttributes, ReactNode } from 'react';
import type { ElementRef } from '../../engine/model/design.ts';
import { classNames } from '../../lib/class-names.ts';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { nameOf } from '../../workspace/operations/name-of.ts';

/** Words that do something, among other text. */
export function TextButton({ className, ...button }: ButtonHTMLAttributes<HTMLButtonElement>) {
  return (
    <button
      type="button"
      {...button}
      className={classNames(
        'max-w-full self-start text-left font-medium break-words text-blue underline decoration-blue-soft underline-offset-2 hover:decoration-blue',
        className,
      )}
    />
  );
}

/** An element's name that selects it. */
export function ElementLink({ to, children }: { readonly to: ElementRef; readonly children?: string }) {
  const design = useOpenDesign();
  const name = useOpenState((state) => nameOf(state.document, to));
  return (
    <TextButton
      aria-label={children === undefined ? `Select ${name}` : `${children}, select ${name}`}
      onClick={() => design.select([to])}
    >
      {children ?? name}
    </TextButton>
  );
}

/** Elements as a list, one a line, each with what there is to say about it. */
export function ElementList({
  of,
  empty,
  detail,
}: {
  readonly of: readonly ElementRef[];
  readonly empty: string;
  readonly detail?: (ref: ElementRef) => ReactNode;
}) {
  if (of.length === 0) return <p className="text-note text-ink-3">{empty}</p>;
  return (
    <ul className="border-t border-rule">
      {of.map((ref) => (
        <li
          key={`${ref.collection}/${ref.id}/${ref.port ?? ''}`}
          className="flex min-h-26 items-center gap-8 border-b border-rule py-3"
        >
          <span className="min-w-0 flex-1">
            <ElementLink to={ref} />
          </span>
          {detail !== undefined && <span className="text-note text-ink-2">{detail(ref)}</span>}
        </li>
      ))}
    </ul>
  );
}
