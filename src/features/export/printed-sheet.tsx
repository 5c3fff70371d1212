import { useEffect, useState } from 'react';
import { createPortal, flushSync } from 'react-dom';
import { Shapes } from '../../components/shapes.tsx';
import { sheetPicture } from '../../drawing/picture/sheet-picture.ts';
import { sheetCount } from '../../drawing/sheets/sheet-numbers.ts';
import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import type { Design } from '../../engine/model/design.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import './printed-sheet.css';

/** What the browser's Print puts on paper in place of the page: each sheet on one of its own, black on white. Drawn only while printing. */
export function PrintedSheet() {
  const [printing, setPrinting] = useState(false);
  useEffect(() => {
    // The browser takes its picture as soon as the handlers are through.
    const begin = (): void => flushSync(() => setPrinting(true));
    const end = (): void => setPrinting(false);
    window.addEventListener('beforeprint', begin);
    window.addEventListener('afterprint', end);
    return () => {
      window.removeEventListener('beforeprint', begin);
      window.removeEventListener('afterprint', end);
    };
  }, []);
  return printing ? createPortal(<Sheets />, document.body) : null;
}

function Sheets() {
  const design = useOpenState((state) => state.document);
  return Array.from({ length: sheetCount(design) }, (_, i) => (
    <Sheet key={i} design={design} number={i + 1} />
  ));
}

function Sheet({ design, number }: { readonly design: Design; readonly number: number }) {
  const { title, box, layers } = sheetPicture(design, {
    look: 'print',
    number,
    tunnelSegments: tunnelSegments(indexNetwork(design)),
  });
  return (
    <svg
      className="printed-sheet"
      viewBox={`${box.x} ${box.y} ${box.width} ${box.height}`}
      role="img"
      aria-label={title}
    >
      {layers.map(({ name, shapes }) => (
        <g key={name}>
          <Shapes shapes={shapes} />
        </g>
      ))}
    </svg>
  );
}
