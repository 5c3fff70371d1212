import { describe, expect, it } from 'vitest';
import { fileNameOf } from '#drawing/picture/file-name.ts';

const named = (title: string, identification?: string): string =>
  fileNameOf({ meta: { title, ...(identification === undefined ? {} : { identification }) } }, 'pdf');

describe('the name of a file', () => {
  it.each([
    ['Terminals stretch, phase 1', 'SMF-L2-004', 'smf-l2-004-terminals-stretch-phase-1.pdf'],
    ['Café “Łódź”', undefined, 'cafe-odz.pdf'],
    ['../../etc/passwd', undefined, 'etc-passwd.pdf'],
    ['漢字', undefined, 'sheet.pdf'],
  ])('of %s, %s is made of plain letters', (title, identification, name) => {
    expect(named(title, identification)).toBe(name);
  });

  it('stays short enough for every system', () => {
    expect(named('long '.repeat(60)).length).toBeLessThan(130);
  });
});
