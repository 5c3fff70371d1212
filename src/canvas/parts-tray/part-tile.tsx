import { Glyph } from '../../components/glyph.tsx';
import type { GlyphName } from '../../drawing/parts/glyphs.ts';
import type { TrayPart } from '../place-part.ts';

const glyphs: { readonly [part in TrayPart]: GlyphName } = {
  firewall: 'firewall',
  'ha-pair': 'ha-pair',
  switch: 'switch',
  router: 'router',
  host: 'host',
  endpoint: 'endpoint',
  tunnel: 'tunnel',
  association: 'jacket',
  site: 'site',
  transport: 'transport',
  cable: 'cable',
  note: 'note',
};

/** A part as it stands in the tray: devices as engraved plates of their own outline, the rest as they are drawn. */
export function PartTile({ part }: { readonly part: TrayPart }) {
  return (
    <span className="part-tile" data-part={part} aria-hidden="true">
      {part === 'endpoint' ? (
        <Ring />
      ) : part === 'tunnel' ? (
        <Cord />
      ) : part === 'association' ? (
        <Jacket />
      ) : (
        <Glyph name={glyphs[part]} size={18} />
      )}
    </span>
  );
}

function Ring() {
  return (
    <svg viewBox="0 0 34 23" width={34} height={23}>
      <path d="M3 3v17M3 11.5h7" stroke="var(--ink)" strokeWidth={2.6} fill="none" />
      <circle cx={18} cy={11.5} r={7} fill="none" stroke="var(--ink)" strokeWidth={6} />
      <circle cx={18} cy={11.5} r={7} fill="none" stroke="var(--brass)" strokeWidth={3.6} />
    </svg>
  );
}

function Cord() {
  return (
    <svg viewBox="0 0 34 23" width={34} height={23}>
      <path d="M8 11.5h18" stroke="var(--casing)" strokeWidth={10} />
      <path d="M8 11.5h18" stroke="var(--seg-a)" strokeWidth={7} />
      <g fill="var(--plate)" stroke="var(--ink)" strokeWidth={1.4}>
        <rect x={1.5} y={4.5} width={8} height={14} rx={2} />
        <rect x={24.5} y={4.5} width={8} height={14} rx={2} />
      </g>
    </svg>
  );
}

function Jacket() {
  return (
    <svg viewBox="0 0 34 23" width={34} height={23}>
      <rect
        x={1}
        y={3}
        width={32}
        height={17}
        fill="var(--jacket)"
        stroke="var(--jacket-edge)"
        strokeWidth={1}
      />
      <path d="M1 8h32" stroke="var(--seg-a)" strokeWidth={4} />
      <path d="M1 15h32" stroke="var(--seg-b)" strokeWidth={4} />
      <g fill="var(--brass)" stroke="var(--ink)" strokeWidth={1.2}>
        <rect x={5} y={1.5} width={5} height={20} rx={1} />
        <rect x={24} y={1.5} width={5} height={20} rx={1} />
      </g>
    </svg>
  );
}
