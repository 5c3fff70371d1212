import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { Button } from '../../components/button.tsx';
import { ErrorNotice } from '../../components/notice.tsx';
import { SegmentedChoice } from '../../components/segmented-choice.tsx';
import { asApiError } from '../../lib/api-error.ts';
import { download } from '../../lib/download.ts';
import { useTheme } from '../../lib/theme.ts';
import { sharedSheetQuery, type ShareKey } from './shared-query.ts';

interface SharedSheetProps {
  readonly shareKey: ShareKey;
  readonly title: string;
  readonly sheets: number;
}

const sizes = [
  { value: 'fit', label: 'Whole' },
  { value: 'large', label: 'Large' },
] as const;

/** The drawing, one sheet at a time, whole or large enough to read its smallest text. */
export function SharedSheet({ shareKey, title, sheets }: SharedSheetProps) {
  const [sheet, setSheet] = useState(1);
  const [size, setSize] = useState<(typeof sizes)[number]['value']>('fit');
  const theme = useTheme();
  const drawn = useQuery(sharedSheetQuery(shareKey, theme === 'slate' ? 'slate' : 'paper', sheet));
  const svg = drawn.data;
  // Drawn as a picture it can do nothing but be looked at.
  const address = useMemo(
    () => (svg === undefined ? undefined : `data:image/svg+xml,${encodeURIComponent(svg)}`),
    [svg],
  );
  return (
    <section aria-label="Sheet" className="border-1.5 border-ink bg-desk">
      <div className="flex flex-wrap items-center gap-10 border-b border-rule-2 bg-panel px-14 py-8">
        {sheets > 1 && (
          <SegmentedChoice
            label="Sheet"
            value={String(sheet)}
            options={Array.from({ length: sheets }, (_, at) => ({
              value: String(at + 1),
              label: `${at + 1}`,
            }))}
            onChange={(value) => setSheet(Number(value))}
          />
        )}
        <SegmentedChoice label="Size" value={size} options={sizes} onChange={setSize} />
        <Button
          small
          className="ml-auto"
          disabled={svg === undefined}
          onClick={() =>
            svg !== undefined &&
            download(`${title}, sheet ${sheet}.svg`, new Blob([svg], { type: 'image/svg+xml' }))
          }
        >
          Save as SVG
        </Button>
      </div>
      {drawn.error !== null && (
        <div className="p-14">
          <ErrorNotice
            action={
              <Button small onClick={() => void drawn.refetch()}>
                Try again
              </Button>
            }
          >
            {asApiError(drawn.error).message}
          </ErrorNotice>
        </div>
      )}
      <div className="overflow-auto p-10" aria-busy={drawn.isPending}>
        {address === undefined ? (
          <p role="status" className="flex h-320 items-center justify-center text-ink-2">
            {drawn.isPending ? 'Drawing the sheet…' : ''}
          </p>
        ) : (
          <img
            src={address}
            alt={`Sheet ${sheet} of ${title}`}
            className={size === 'fit' ? 'mx-auto block h-auto w-full' : 'block h-auto w-[1800px] max-w-none'}
          />
        )}
      </div>
    </section>
  );
}
