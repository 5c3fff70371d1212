import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { version } from '../../../package.json';
import { CellGrid, FieldError } from '../../components/cell.tsx';
import { Mark } from '../../components/mark.tsx';
import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import { chooseTheme, useTheme } from '../../lib/theme.ts';

/** How a cell of the block looks, whose rules the block draws itself. */
export const blockCell =
  'border-ink! border-b-0! border-x-0! mx-0! px-14! pt-8! pb-10! [&_input]:text-section';

interface FormBlockProps {
  readonly title: string;
  /** Names the form to a screen reader. */
  readonly label: string;
  readonly onSubmit: () => void;
  /** What went wrong with the form as a whole. */
  readonly refusal?: string | undefined;
  /** What stands in the row beneath, the button that does it last. */
  readonly actions: ReactNode;
  /** The cells to type in. */
  readonly children: ReactNode;
}

/** The title block of an empty sheet as a form: for whoever is not signed in yet. */
export function FormBlock({ title, label, onSubmit, refusal, actions, children }: FormBlockProps) {
  const theme = useTheme();
  return (
    <form
      noValidate
      aria-label={label}
      className="bg-paper"
      onSubmit={(event) => {
        event.preventDefault();
        onSubmit();
      }}
    >
      <div className="grid grid-cols-[198px_1fr] max-sm:grid-cols-1">
        <div className="flex flex-col items-center justify-center gap-12 py-14 max-sm:flex-row max-sm:justify-start max-sm:border-b max-sm:border-ink max-sm:px-14">
          <Mark width={48} />
          <span className="text-[22px]/28 font-semibold max-sm:text-title">Longpatch</span>
        </div>
        <CellGrid className="border-ink sm:border-l [&>div:first-child]:p-0 [&>div:last-child]:px-14 [&>div:last-child:not(:empty)]:pb-9">
          <div className="px-14 pt-7 pb-8">
            <span className="block text-label text-ink-3">Title</span>
            <h1 className="text-page font-semibold">{title}</h1>
          </div>
          {children}
        </CellGrid>
      </div>
      {refusal !== undefined && (
        <div className="border-t border-ink px-14 pb-8">
          <FieldError>{refusal}</FieldError>
        </div>
      )}
      <div className="flex items-center justify-between gap-14 border-t border-ink px-14 py-13">
        {actions}
      </div>
      <div className="grid grid-cols-[84px_128px_1fr_74px_74px] border-t border-ink max-sm:grid-cols-[1fr_1fr_1fr]">
        <Fact label="Language">English</Fact>
        <div className="border-l border-ink px-13 py-6 max-sm:col-span-3 max-sm:row-start-3 max-sm:border-t max-sm:border-l-0">
          <span className="block text-label text-ink-3">Without signing in</span>
          <Link to="/wire" className="text-value text-blue underline">
            Wire
          </Link>
        </div>
        <div className="border-l border-ink px-13 py-6 max-sm:col-span-3 max-sm:row-start-2 max-sm:border-t max-sm:border-l-0">
          <span className="mb-3 block text-label text-ink-3">Theme</span>
          <SegmentedChoice
            small
            label="Theme"
            value={theme}
            options={[
              { value: 'paper', label: 'Paper' },
              { value: 'slate', label: 'Slate' },
            ]}
            onChange={chooseTheme}
          />
        </div>
        <Fact label="Rev." ruled>
          {version}
        </Fact>
        <Fact label="Sheet" ruled>
          1/1
        </Fact>
      </div>
    </form>
  );
}

function Fact({
  label,
  ruled = false,
  children,
}: {
  readonly label: string;
  readonly ruled?: boolean;
  readonly children: ReactNode;
}) {
  return (
    <div className={ruled ? 'border-l border-ink px-13 py-6' : 'px-14 py-6'}>
      <span className="block text-label text-ink-3">{label}</span>
      <span className="text-value">{children}</span>
    </div>
  );
}
