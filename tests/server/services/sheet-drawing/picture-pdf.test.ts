import { getDocument, OPS } from 'pdfjs-dist/legacy/build/pdf.mjs';
import { describe, expect, test } from 'vitest';
import type { PaperName } from '#drawing/picture/paper-sizes.ts';
import { paperNames } from '#drawing/picture/paper-sizes.ts';
import type { Design } from '#engine/model/design.ts';
import { noNumberingContext } from '#engine/numbering/numbering-context.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { demoDesign } from '../../../../seeds/demo-designs/demo-design.ts';
import type { SheetJob } from '../../../../server/services/sheet-drawing/sheet-job.ts';
import { drawSheet } from '../../../../server/services/sheet-drawing/sheet-job.ts';

const checks = { from: { numbering: noNumberingContext }, waivers: [], today: '2026-01-05' };
const jobOf = (document: Design, more: Partial<SheetJob> = {}): SheetJob => ({
  format: 'pdf',
  document,
  look: 'print',
  view: { layers: [] },
  addresses: true,
  drawnAt: new Date('2026-01-05T08:00:00Z'),
  ...more,
});

/** What an independent reader finds in a PDF. */
const read = async (job: SheetJob) => {
  const file = await drawSheet(job);
  const pdf = await getDocument({ data: new Uint8Array(file), verbosity: 0 }).promise;
  const page = await pdf.getPage(1);
  const { items } = await page.getTextContent();
  const words = items.flatMap((item) => ('str' in item && item.str.trim() !== '' ? [item.str] : []));
  const { fnArray } = await page.getOperatorList();
  const bytes = Buffer.from(file).toString('latin1');
  return {
    pages: pdf.numPages,
    sizePt: [page.view[2]!, page.view[3]!],
    words,
    operators: new Set(fnArray),
    info: (await pdf.getMetadata()).info as { readonly [name: string]: unknown },
    bytes,
  };
};

// ISO 216:2007 table 1 in millimetres, from memory; a point is 1/72 inch of 25.4 mm.
const points = {
  A4: [841.89, 595.276],
  A3: [1190.551, 841.89],
  A2: [1683.78, 1190.551],
  A1: [2383.937, 1683.78],
  A0: [3370.394, 2383.937],
} as const;

describe('a sheet as PDF', () => {
  test.each(paperNames)('is one page of %s', async (paper: PaperName) => {
    const { pages, sizePt } = await read(jobOf(demoDesign('fault-free'), { paper }));
    expect(pages).toBe(1);
    expect(sizePt[0]).toBeCloseTo(points[paper][0], 2);
    expect(sizePt[1]).toBeCloseTo(points[paper][1], 2);
  });

  test('holds text as text, once each, in embedded faces, and no picture', async () => {
    const { words, operators, bytes, info } = await read(jobOf(demoDesign('fault-free')));
    for (const word of ['10.255.0.1', '10130', 'Terminals stretch, phase 1', 'Ticketing', '203.0.113.45'])
      expect(words.filter((said) => said === word).length, word).toBeGreaterThan(0);
    // Written with a rim, which must not be read as a second address.
    expect(words.filter((word) => word === '10.255.0.13')).toHaveLength(1);
    for (const image of [OPS.paintImageXObject, OPS.paintInlineImageXObject, OPS.paintImageMaskXObject])
      expect(operators.has(image)).toBe(false);
    expect(operators.has(OPS.constructPath)).toBe(true);
    expect(bytes).toContain('/FontFile2');
    expect(bytes).toMatch(/\/BaseFont \/[A-Z]+\+WorkSans/);
    expect(bytes).not.toMatch(/\/BaseFont \/Helvetica/);
    expect(info).toMatchObject({ Title: 'Terminals stretch, phase 1', Author: 'R. Halloran' });
  });

  test('shows findings where they are asked for, and leaves the waived without words', async () => {
    const design = demoDesign('planted-faults');
    const plain = (await read(jobOf(design))).words;
    expect(plain).not.toContain('VNIs differ');
    const { words } = await read(jobOf(design, { checks, look: 'paper' }));
    expect(words).toEqual(expect.arrayContaining(['VNIs differ', '1604 in 1500', 'broadcast storm']));
    const { key, fingerprint } = runRules(design).find((finding) => finding.words === 'VNIs differ')!;
    const waivers = [{ findingKey: key, fingerprint, expiresOn: '2026-02-01', withdrawnAt: null }];
    const accepted = (await read(jobOf(design, { checks: { ...checks, waivers } }))).words;
    expect(accepted).not.toContain('VNIs differ');
    expect(accepted).toContain('broadcast storm');
  });

  test('writes letters of other Latin scripts with their own face, and keeps unknown ones from breaking it', async () => {
    const design = demoDesign('fault-free');
    const titled = { ...design, meta: { ...design.meta, title: 'Łódź 漢字 <&>' } };
    const { words, info } = await read(jobOf(titled));
    expect(words.join('')).toContain('Ł');
    expect(words.join('')).toContain('ód');
    expect(info['Title']).toBe('Łódź 漢字 <&>');
  });

  test('is drawn in every look', async () => {
    for (const look of ['paper', 'slate', 'print', 'print-colour'] as const) {
      const { operators } = await read(jobOf(demoDesign('planted-faults'), { look, checks }));
      expect(operators.has(OPS.showText), look).toBe(true);
    }
  });
});
