import PDFDocument from 'pdfkit';
import type { PaperName } from '#drawing/picture/paper-sizes.ts';
import { paperSizesMm } from '#drawing/picture/paper-sizes.ts';
import type { SheetPicture } from '#drawing/picture/sheet-picture.ts';
import type { Shape, ShapeAttributes } from '#drawing/shape.ts';
import { faceName, runOutline, runWidth, textFeatures, textRuns } from './pdf-text.ts';
import type { TextRun } from './pdf-text.ts';
import { faceFile } from './work-sans.ts';
import type { Weight } from './work-sans.ts';

type Pdf = InstanceType<typeof PDFDocument>;

const pointsPerMm = 72 / 25.4;

export interface PdfFacts {
  readonly title: string;
  readonly paper: PaperName;
  readonly author: string | undefined;
  readonly subject: string;
  readonly drawnAt: Date;
}

/** Pictures as a PDF, each a page: lines as lines, text as text in embedded Work Sans, at real size. */
export function picturePdf(pictures: readonly SheetPicture[], facts: PdfFacts): Promise<Buffer> {
  const { width, height } = paperSizesMm[facts.paper];
  const page = { size: [width * pointsPerMm, height * pointsPerMm], margin: 0 };
  const pdf = new PDFDocument({
    ...page,
    autoFirstPage: false,
    pdfVersion: '1.7',
    lang: 'en',
    displayTitle: true,
    info: {
      Title: facts.title,
      ...(facts.author === undefined ? {} : { Author: facts.author }),
      ...(facts.subject === '' ? {} : { Subject: facts.subject }),
      CreationDate: facts.drawnAt,
    },
  });
  for (const weight of [400, 500, 600, 700] as const)
    for (const script of ['latin', 'latin-ext'] as const)
      pdf.registerFont(faceName(weight, script), faceFile(weight, script, 'woff'));
  for (const { box, layers } of pictures) {
    pdf.addPage(page);
    pdf.scale((width * pointsPerMm) / box.width).translate(-box.x, -box.y);
    for (const { shapes } of layers) for (const shape of shapes) draw(pdf, shape, 1);
  }
  return new Promise((resolve, reject) => {
    const chunks: Buffer[] = [];
    pdf.on('data', (chunk: Buffer) => chunks.push(chunk));
    pdf.on('error', reject);
    pdf.on('end', () => resolve(Buffer.concat(chunks)));
    pdf.end();
  });
}

const number = (attrs: ShapeAttributes, name: string, otherwise = 0): number =>
  Number(attrs[name] ?? otherwise);

const painted = (paint: string | number | undefined): string | undefined =>
  typeof paint === 'string' && paint !== 'none' ? paint : undefined;

function draw(pdf: Pdf, shape: Shape, inherited: number): void {
  const { el, attrs } = shape;
  const opacity = inherited * number(attrs, 'opacity', 1);
  // Tooltips have no place on paper.
  if (el === 'title') return;
  if (el === 'text') return drawText(pdf, shape, opacity);
  pdf.save();
  if (attrs['transform'] !== undefined) transform(pdf, String(attrs['transform']));
  if (el === 'g') {
    for (const child of shape.children ?? []) if (typeof child !== 'string') draw(pdf, child, opacity);
  } else drawOutline(pdf, shape, opacity);
  pdf.restore();
}

function transform(pdf: Pdf, list: string): void {
  for (const [, name, values] of list.matchAll(/(\w+)\(([^)]*)\)/g)) {
    const [first = 0, second] = values!.split(/[\s,]+/).map(Number);
    if (name === 'translate') pdf.translate(first, second ?? 0);
    else if (name === 'scale') pdf.scale(first, second ?? first);
    else if (name === 'rotate') pdf.rotate(first);
    else throw new Error(`no way to draw the transform ${name}`);
  }
}

function drawOutline(pdf: Pdf, { el, attrs }: Shape, opacity: number): void {
  // SVG 2, 13.2 and 13.5: without a word shapes are filled in black and have no stroke.
  const fill = painted(attrs['fill'] ?? '#000000');
  const stroke = painted(attrs['stroke']);
  if ((fill === undefined || el === 'line') && stroke === undefined) return;
  const fillOpacity = opacity * number(attrs, 'fillOpacity', 1);
  if (fillOpacity < 1) pdf.fillOpacity(fillOpacity);
  if (opacity < 1) pdf.strokeOpacity(opacity);
  if (stroke !== undefined) {
    pdf.lineWidth(number(attrs, 'strokeWidth', 1));
    if (attrs['strokeLinecap'] === 'round') pdf.lineCap('round');
    if (attrs['strokeLinejoin'] === 'round') pdf.lineJoin('round');
    dash(pdf, attrs);
  }
  // A line has no inside.
  const inside = el === 'line' ? undefined : fill;
  trace(pdf, el, attrs);
  if (inside === undefined) pdf.stroke(stroke ?? '#000000');
  else if (stroke === undefined) pdf.fill(inside);
  else if (attrs['paintOrder'] === 'stroke') {
    pdf.stroke(stroke);
    trace(pdf, el, attrs);
    pdf.fill(inside);
  } else pdf.fillAndStroke(inside, stroke);
}

function trace(pdf: Pdf, el: Shape['el'], attrs: ShapeAttributes): void {
  const at = (name: string): number => number(attrs, name);
  if (el === 'rect') {
    const radius = Math.min(at('rx'), at('width') / 2, at('height') / 2);
    if (radius > 0) pdf.roundedRect(at('x'), at('y'), at('width'), at('height'), radius);
    else pdf.rect(at('x'), at('y'), at('width'), at('height'));
  } else if (el === 'circle') pdf.circle(at('cx'), at('cy'), at('r'));
  else if (el === 'ellipse') pdf.ellipse(at('cx'), at('cy'), at('rx'), at('ry'));
  else if (el === 'line') pdf.moveTo(at('x1'), at('y1')).lineTo(at('x2'), at('y2'));
  else if (el === 'path') pdf.path(String(attrs['d'] ?? ''));
  else if (el === 'polygon') pdf.path(`M${String(attrs['points'] ?? '')}z`);
  else throw new Error(`no way to draw the shape ${el}`);
}

// A dash of no length is a dot where caps are round; the writer wants one of some length.
const shortestDashPx = 0.01;

function dash(pdf: Pdf, attrs: ShapeAttributes): void {
  if (attrs['strokeDasharray'] === undefined) return;
  const lengths = String(attrs['strokeDasharray'])
    .split(/[\s,]+/)
    .map((length) => Math.max(shortestDashPx, Number(length)));
  const period = lengths.reduce((sum, length) => sum + length, 0) * (lengths.length % 2 === 0 ? 1 : 2);
  const offset = number(attrs, 'strokeDashoffset') % period;
  // ISO 32000-1, 8.4.3.6: a phase below nothing is not allowed.
  // The writer takes a list of lengths, its types one or two.
  pdf.dash(lengths as unknown as number, { phase: offset < 0 ? offset + period : offset });
}

interface Piece {
  readonly run: TextRun;
  readonly fill: string;
}

/** A text's own words and its spans', each with its colour. */
function piecesOf({ attrs, children = [] }: Shape): readonly Piece[] {
  const pieces = (words: string, own: ShapeAttributes): readonly Piece[] =>
    textRuns(words, number(own, 'fontWeight', 400) as Weight).map((run) => ({
      run,
      fill: painted(own['fill']) ?? '#000000',
    }));
  return children.flatMap((child) => {
    if (typeof child === 'string') return pieces(child, attrs);
    if (child.el !== 'tspan') return [];
    const own = { ...attrs, ...child.attrs };
    return (child.children ?? []).flatMap((words) => (typeof words === 'string' ? pieces(words, own) : []));
  });
}

function drawText(pdf: Pdf, shape: Shape, opacity: number): void {
  const { attrs } = shape;
  const size = number(attrs, 'fontSize', 16);
  const pieces = piecesOf(shape);
  const widths = pieces.map(({ run }) => runWidth(run, size));
  const whole = widths.reduce((sum, width) => sum + width, 0);
  const anchor = attrs['textAnchor'] === 'middle' ? whole / 2 : attrs['textAnchor'] === 'end' ? whole : 0;
  const y = number(attrs, 'y');
  const starts = widths.map(
    (_, i) => number(attrs, 'x') - anchor + widths.slice(0, i).reduce((sum, width) => sum + width, 0),
  );
  pdf.save();
  if (opacity < 1) pdf.opacity(opacity);
  const rim = painted(attrs['stroke']);
  if (rim !== undefined)
    pieces.forEach(({ run }, i) =>
      drawRim(pdf, run, starts[i]!, y, size, rim, number(attrs, 'strokeWidth', 1)),
    );
  pieces.forEach(({ run, fill }, i) => {
    pdf
      .font(run.face)
      .fontSize(size)
      .fillColor(fill)
      .text(run.text, starts[i], y, {
        lineBreak: false,
        baseline: 'alphabetic',
        features: [...textFeatures],
      });
  });
  pdf.restore();
}

/** The rim is drawn as outlines: as text it would be read and found twice. */
function drawRim(
  pdf: Pdf,
  run: TextRun,
  x: number,
  y: number,
  size: number,
  colour: string,
  widthPx: number,
): void {
  const scale = size / run.font.unitsPerEm;
  pdf.save().translate(x, y).scale(scale, -scale);
  pdf.lineWidth(widthPx / scale).lineJoin('round');
  for (const { x: offset, d } of runOutline(run)) {
    if (d === '') continue;
    pdf.save().translate(offset, 0).path(d).stroke(colour).restore();
  }
  pdf.restore();
}
