import { Glyph } from '../../components/glyph.tsx';

// Pixels of a 1440 × 900 page. Only the middle of the drawing is given; the ground runs on to both sides, as far as
// there is room, so that it reaches the frame at any width.
const whole = '64 62 1312 420';
const breakOnly = '450 336 540 142';
const groundTop = 342;
const groundHeight = 132;
const groundLeft = -1100;
const groundWidth = 3600;
const middle = 720;

const ink = 'var(--ink)';
const casing = 'var(--casing)';

/** What this is, in the lines in which the drawing has it. */
export const workingLine = ['A patch lead that is', '400 km long, planned before', 'anyone plugs it in.'];

/** Two segments in one jacket, from here to there through the ground, with a break line at 400 km. */
export function CordInTheGround({
  view,
  className,
}: {
  readonly view: 'whole' | 'break';
  readonly className?: string;
}) {
  return (
    <svg aria-hidden="true" viewBox={view === 'whole' ? whole : breakOnly} className={className}>
      <Ground />
      <HalfOfTheCord />
      <g transform={`translate(${2 * middle} 0) scale(-1 1)`}>
        <HalfOfTheCord />
      </g>
      <BreakLine />
      <Distance />
      {view === 'whole' && (
        <>
          <End name="here" switchName="sw-a" />
          <g transform={`translate(${2 * middle} 0) scale(-1 1)`}>
            <End name="there" switchName="sw-b" mirrored />
          </g>
          <g fontSize="31" fontWeight="500" textAnchor="middle" fill={ink}>
            {workingLine.map((words, at) => (
              <text key={words} x={middle} y={143 + 39 * at}>
                {words}
              </text>
            ))}
          </g>
          <g fontSize="15">
            <text x="90" y="400" fontWeight="600" fill={ink}>
              Coastal access
            </text>
            <text x="90" y="421" fontSize="14" fill="var(--ink-2)">
              MTU 1500, not trusted
            </text>
            <text x="1350" y="400" fontWeight="600" fill={ink} textAnchor="end">
              18 ms ± 3
            </text>
            <text x="1350" y="421" fontSize="14" fill="var(--ink-2)" textAnchor="end">
              loss 0.02 %
            </text>
          </g>
        </>
      )}
    </svg>
  );
}

function Ground() {
  const bottom = groundTop + groundHeight;
  const ticks = Array.from(
    { length: Math.floor(groundWidth / 85) },
    (_, index) => groundLeft + 20 + index * 85,
  );
  const strokes = (x: number, y: number) => [0, 8, 16].map((shift) => `M${x + shift} ${y + 7}l7 -7`).join('');
  return (
    <g>
      <rect x={groundLeft} y={groundTop} width={groundWidth} height={groundHeight} fill="var(--band)" />
      <path
        d={ticks.map((x) => strokes(x, groundTop + 2) + strokes(x, bottom - 9)).join('')}
        stroke="var(--band-tick)"
        strokeWidth="1.6"
        fill="none"
      />
      <path
        d={`M${groundLeft} ${groundTop}h${groundWidth}M${groundLeft} ${bottom}h${groundWidth}`}
        stroke="var(--band-edge)"
        strokeWidth="2.2"
        strokeDasharray="16 7"
      />
    </g>
  );
}

/** Jacket with two tracers 16 px apart, concentric in the bends, from the cuff to the break. */
function HalfOfTheCord() {
  const jacket = 'M400 174H410A58 58 0 0 1 468 232V349.5A58 58 0 0 0 526 407.5H721';
  const upper = 'M400 166H410A66 66 0 0 1 476 232V349.5A50 50 0 0 0 526 399.5H721';
  const lower = 'M400 182H410A50 50 0 0 1 460 232V349.5A66 66 0 0 0 526 415.5H721';
  return (
    <g fill="none">
      <path d={jacket} stroke="var(--jacket-edge)" strokeWidth="38.4" />
      <path d={jacket} stroke="var(--jacket)" strokeWidth="36" />
      <path d={upper} stroke="var(--seg-a)" strokeWidth="8" />
      <path d={lower} stroke="var(--seg-b)" strokeWidth="8" />
      <path d={lower} stroke="var(--seg-b-on)" strokeWidth="8" strokeDasharray="2.1 9.8" />
    </g>
  );
}

function BreakLine() {
  const edge = 'l12 29 -9 11 11 28';
  return (
    <g strokeLinejoin="round">
      <path d={`M704 374${edge}h19l-11 -28 9 -11 -12 -29z`} fill="var(--band)" />
      <path d={`M704 374${edge}M725 374${edge}`} fill="none" stroke={ink} strokeWidth="1.6" />
    </g>
  );
}

function Distance() {
  return (
    <g>
      <path
        d="M468 442v20M972 442v20M468 452h206M972 452H764"
        stroke="var(--ink-3)"
        strokeWidth="1.2"
        fill="none"
      />
      <path d="M468.5 452l12 -3.600v7.200zM971.5 452l-12 -3.600v7.200z" fill={ink} />
      <text x={middle} y="457.5" textAnchor="middle" fontSize="16" fontWeight="600" fill={ink}>
        400 km
      </text>
    </g>
  );
}

/** Firewall, switch, endpoint and ferrules of one end. Mirrored as a whole, its words are mirrored back. */
function End({
  name,
  switchName,
  mirrored = false,
}: {
  readonly name: string;
  readonly switchName: string;
  readonly mirrored?: boolean;
}) {
  return (
    <g>
      <path d="M172 205V236" stroke={ink} strokeWidth="1.7" />
      <Faceplate
        x={120}
        y={125}
        width={150}
        height={80}
        chamfer={8}
        mirrored={mirrored}
        glyph="firewall"
        name={name}
        line="firewall"
      />
      <Faceplate
        x={120}
        y={236}
        width={104}
        height={52}
        chamfer={0}
        mirrored={mirrored}
        glyph="switch"
        name={switchName}
      />
      <g stroke={ink} strokeWidth="1.6">
        <path d="M167 200h10v10h-10zM167 231h10v10h-10z" fill={ink} />
        <circle cx="212" cy="205" r="5.3" fill="var(--plate)" />
        <circle cx="144" cy="288" r="5.3" fill={ink} />
        <circle cx="172" cy="288" r="5.3" fill={ink} />
        <circle cx="200" cy="288" r="5.3" fill="var(--plate)" />
      </g>
      <path d="M270 169h10v10h-10zM300 171.500h8v5h-8z" fill={ink} />
      <g stroke={casing} strokeWidth="1.6">
        <circle cx="288" cy="174" r="13.5" fill="var(--brass)" />
        <circle cx="288" cy="174" r="6.5" fill="var(--paper)" />
      </g>
      <path d="M307.5 151v46" stroke={ink} strokeWidth="4" strokeLinecap="round" />
      <Lead from={161.5} to={166} segment="a" />
      <Lead from={186.5} to={182} segment="b" />
      <Ferrule y={151} vni="10110" letter="A" segment="a" mirrored={mirrored} />
      <Ferrule y={176} vni="10120" letter="B" segment="b" mirrored={mirrored} />
      <g stroke={casing}>
        <rect x="395.5" y="152" width="9" height="44" rx="2" fill="var(--brass)" strokeWidth="1.5" />
        <path d="M400 155v38" stroke="var(--brass-deep)" />
      </g>
    </g>
  );
}

/** Turns words the right way round again about their own middle. */
const unmirror = (mirrored: boolean, centre: number): string | undefined =>
  mirrored ? `translate(${2 * centre} 0) scale(-1 1)` : undefined;

function Faceplate({
  x,
  y,
  width,
  height,
  chamfer,
  glyph,
  name,
  line,
  mirrored,
}: {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
  readonly chamfer: number;
  readonly glyph: 'firewall' | 'switch';
  readonly name: string;
  readonly line?: string;
  readonly mirrored: boolean;
}) {
  const c = chamfer;
  const strip = 29;
  const outline = `M${x + c} ${y}h${width - 2 * c}l${c} ${c}v${height - 2 * c}l${-c} ${c}h${-(width - 2 * c)}l${-c} ${-c}v${-(height - 2 * c)}z`;
  const head = `M${x + c} ${y}h${width - 2 * c}l${c} ${c}v${strip - c}h${-width}v${-(strip - c)}z`;
  return (
    <g>
      <path d={outline} fill="var(--plate)" />
      <path d={head} fill="var(--strip)" />
      <path d={outline} fill="none" stroke={ink} strokeWidth="1.8" />
      <g transform={unmirror(mirrored, x + width / 2)}>
        <g color="var(--strip-ink)">
          <Glyph name={glyph} x={x + 9} y={y + 6} size={18} />
        </g>
        <text x={x + 34} y={y + 20} fontSize="15" fontWeight="600" fill="var(--strip-ink)">
          {name}
        </text>
        {line !== undefined && (
          <text x={x + width / 2} y={y + 54} fontSize="13" textAnchor="middle" fill="var(--ink-2)">
            {line}
          </text>
        )}
      </g>
    </g>
  );
}

/** From a ferrule's cap into the cuff. */
function Lead({
  from,
  to,
  segment,
}: {
  readonly from: number;
  readonly to: number;
  readonly segment: 'a' | 'b';
}) {
  const path = `M376 ${from}C386 ${from} 386 ${to} 398 ${to}`;
  return (
    <g fill="none">
      <path d={path} stroke={casing} strokeWidth="11.8" />
      <path d={path} stroke={`var(--seg-${segment})`} strokeWidth="9" />
      {segment === 'b' && <path d={path} stroke="var(--seg-b-on)" strokeWidth="9" strokeDasharray="2.4 11" />}
    </g>
  );
}

function Ferrule({
  y,
  vni,
  letter,
  segment,
  mirrored,
}: {
  readonly y: number;
  readonly vni: string;
  readonly letter: string;
  readonly segment: 'a' | 'b';
  readonly mirrored: boolean;
}) {
  const x = 308;
  return (
    <g>
      <rect x={x} y={y} width="70" height="21" rx="3" fill="var(--plate)" />
      <path d={`M${x + 5} ${y}h-2a3 3 0 0 0 -3 3v15a3 3 0 0 0 3 3h2z`} fill="var(--brass)" />
      <path d={`M${x + 51} ${y}h16a3 3 0 0 1 3 3v15a3 3 0 0 1 -3 3h-16z`} fill={`var(--seg-${segment})`} />
      <g fill="none" stroke={ink} strokeWidth="1.5">
        <rect x={x} y={y} width="70" height="21" rx="3" />
        <path d={`M${x + 5} ${y}v21M${x + 51} ${y}v21`} />
      </g>
      <g textAnchor="middle" fontSize="13.5" fontWeight="600">
        <text transform={unmirror(mirrored, x + 28)} x={x + 28} y={y + 15.3} fill={ink}>
          {vni}
        </text>
        <text
          transform={unmirror(mirrored, x + 60.5)}
          x={x + 60.5}
          y={y + 15.3}
          fontWeight="700"
          fill={`var(--seg-${segment}-on)`}
        >
          {letter}
        </text>
      </g>
    </g>
  );
}
