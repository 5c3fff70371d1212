import { useId, useState, type ReactNode } from 'react';
import { Icon } from '../../components/icon.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import { useChecks } from '../../workspace/checks-context.tsx';
import { markWithin, type FieldPath } from './field-marks.ts';
import { useInspectorTools } from './inspector-context.ts';

interface SectionProps {
  readonly title: string;
  /** Stands at the right of the title: a count, a small button. */
  readonly beside?: ReactNode;
  /** Open from the start; the rest of a long form is not. */
  readonly open?: boolean;
  /** Parts of the document that it shows: a finding about them opens it and is marked beside its title. */
  readonly about?: readonly FieldPath[];
  readonly children: ReactNode;
}

/** A named part of the panel that folds away. */
export function Section({ title, beside, open = true, about = [], children }: SectionProps) {
  const { sections } = useInspectorTools();
  const { openFindings } = useChecks();
  const mark = about.map((path) => markWithin(openFindings, path)).find((each) => each !== undefined);
  const [shown, setShown] = useState(mark !== undefined || (sections.get(title) ?? open));
  const id = useId();
  return (
    <section aria-labelledby={id}>
      <div className="flex min-h-24 items-center gap-8">
        <h3 className="min-w-0 flex-1">
          <button
            type="button"
            id={id}
            aria-expanded={shown}
            onClick={() => {
              sections.set(title, !shown);
              setShown(!shown);
            }}
            className="-ml-3 flex w-full items-center gap-4 text-left text-base font-semibold text-ink"
          >
            <Icon name={shown ? 'chevron-down' : 'chevron-right'} size={14} />
            {title}
            {mark !== undefined && (
              <>
                <SeverityShape severity={mark.severity} size={12} />
                <span className="sr-only">, {mark.severity}</span>
              </>
            )}
          </button>
        </h3>
        {beside}
      </div>
      {shown && <div className="mt-4 flex flex-col gap-8">{children}</div>}
    </section>
  );
}
