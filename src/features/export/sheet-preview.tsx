import { useEffect, useState } from 'react';
import { pictureSvgText } from '../../drawing/picture/picture-svg.ts';
import type { SheetPicture } from '../../drawing/picture/sheet-picture.ts';
import { browserFaces } from './browser-faces.ts';

/** The file itself, small: what is seen here is what leaves. */
export function SheetPreview({
  picture,
  caption,
}: {
  readonly picture: SheetPicture;
  readonly caption: string;
}) {
  const url = usePictureUrl(picture);
  const { width, height } = picture.box;
  return (
    <figure className="m-0">
      <div className="border border-rule-2 bg-desk p-14">
        <div className="w-full shadow-sheet" style={{ aspectRatio: `${width} / ${height}` }}>
          {url !== undefined && (
            <img src={url} alt={`Preview of the sheet ${picture.title}`} className="block size-full" />
          )}
        </div>
      </div>
      <figcaption className="mt-6 text-note text-ink-2">{caption}</figcaption>
    </figure>
  );
}

/** The picture as the address of an SVG file, once the fonts are there. */
function usePictureUrl(picture: SheetPicture): string | undefined {
  const [url, setUrl] = useState<string>();
  useEffect(() => {
    let made: string | undefined;
    let wanted = true;
    const show = (text: string): void => {
      if (!wanted) return;
      made = URL.createObjectURL(new Blob([text], { type: 'image/svg+xml' }));
      setUrl(made);
    };
    const plain = pictureSvgText(picture);
    browserFaces(plain)
      .then((fonts) => show(pictureSvgText(picture, { fonts })))
      // Without its fonts the preview still shows where everything is.
      .catch(() => show(plain));
    return () => {
      wanted = false;
      if (made !== undefined) URL.revokeObjectURL(made);
    };
  }, [picture]);
  return url;
}
