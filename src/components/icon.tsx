import type { SVGProps } from 'react';

/** Outlines in a 20 × 20 box, stroke 1.5; what the interface itself needs beside the glyphs of the drawing. */
const icons = {
  plus: 'M10 3.5v13M3.5 10h13',
  minus: 'M3.5 10h13',
  check: 'M3.5 10.5l4.2 4.5L16.5 5',
  cross: 'M4.5 4.5l11 11M15.5 4.5l-11 11',
  'chevron-down': 'M4.5 7.2l5.5 5.6 5.5-5.6',
  'chevron-up': 'M4.5 12.8L10 7.2l5.5 5.6',
  'chevron-left': 'M12.8 4.5L7.2 10l5.6 5.5',
  'chevron-right': 'M7.2 4.5l5.6 5.5-5.6 5.5',
  play: 'M6 3.6l10 6.4-10 6.4z',
  pause: 'M6.6 4v12M13.4 4v12',
  search: 'M8.6 3a5.6 5.6 0 1 1 0 11.2A5.6 5.6 0 0 1 8.6 3zM12.8 12.8l4.4 4.4',
  more: 'M4 10h.01M10 10h.01M16 10h.01',
  undo: 'M7.4 4L3.6 7.8l3.8 3.8M3.8 7.8h8a4.4 4.4 0 0 1 0 8.8H8',
  redo: 'M12.6 4l3.8 3.8-3.8 3.8M16.2 7.8h-8a4.4 4.4 0 0 0 0 8.8H12',
  eye: 'M1.8 10c2-3.6 5-5.4 8.2-5.4s6.2 1.8 8.2 5.4c-2 3.6-5 5.4-8.2 5.4S3.8 13.6 1.8 10zM10 7.6a2.4 2.4 0 1 1 0 4.8 2.4 2.4 0 0 1 0-4.8z',
  'eye-shut': 'M1.8 8.4c2 3.6 5 5.4 8.2 5.4s6.2-1.8 8.2-5.4M4.4 12l-1.8 2.4M10 13.8v3M15.6 12l1.8 2.4',
  'cut-wave': 'M2.4 8.6a11 11 0 0 1 15.2 0M5.2 11.8a7 7 0 0 1 9.6 0M8 14.9a3 3 0 0 1 4 0M3.4 3l13.2 14',
  sort: 'M6.5 8L10 4.2 13.5 8M6.5 12l3.5 3.8 3.5-3.8',
  'sort-up': 'M6.5 11.6L10 7.8l3.5 3.8',
  'sort-down': 'M6.5 8.4L10 12.2l3.5-3.8',
  pointer: 'M4.5 3.2l11.8 5.4-5 1.9-2 5z',
  move: 'M10 2v16M2 10h16M7.6 4.4L10 2l2.4 2.4M7.6 15.6L10 18l2.4-2.4M4.4 7.6L2 10l2.4 2.4M15.6 7.6L18 10l-2.4 2.4',
  panel: 'M2.5 4h15v12h-15zM12.2 4v12',
  keys: 'M2 5h16v10.5H2zM5 8.2h1.4M9.3 8.2h1.4M13.6 8.2H15M6 12.4h8',
  pin: 'M6.4 3h7.2M7.6 3v5.4L5 11.6h10l-2.6-3.2V3M10 11.6V18',
  lock: 'M4.4 9h11.2v8H4.4zM6.8 9V6.2a3.2 3.2 0 0 1 6.4 0V9',
  unlock: 'M4.4 9h11.2v8H4.4zM6.8 9V6.2a3.2 3.2 0 0 1 6.2-1.2',
} as const;

export type IconName = keyof typeof icons;

interface IconProps extends SVGProps<SVGSVGElement> {
  readonly name: IconName;
  readonly size?: number;
}

/** A picture beside words, or in a button that has a label: it says nothing to a screen reader. */
export function Icon({ name, size = 16, ...rest }: IconProps) {
  const dots = name === 'more';
  return (
    <svg
      aria-hidden="true"
      viewBox="0 0 20 20"
      width={size}
      height={size}
      fill="none"
      stroke="currentColor"
      strokeWidth={dots ? 2.6 : 1.8}
      strokeLinecap={dots ? 'round' : 'butt'}
      strokeLinejoin="round"
      className="shrink-0"
      {...rest}
    >
      <path d={icons[name]} />
    </svg>
  );
}
