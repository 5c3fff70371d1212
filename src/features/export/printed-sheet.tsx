import { useEffect, useState } from 'react';
import { createPortal, flushSync } from 'react-dom';
import { Shapes } from '../../components/shapes.tsx';
import { sheetPicture } from '../../drawing/picture/sheet-picture.ts';
import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import './printed-sheet.css';

/** What the browser's Print puts on paper in place of the page: the sheet, black on white. Drawn only while printing. */
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
  return printing ? createPortal(<Sheet />, document.body) : null;
}

function Sheet() {
  const design = useOpenState((state) => state.document);
  const { title, box, layers } = sheetPicture(design, {
    look: 'print',
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
