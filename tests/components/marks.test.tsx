import { render, screen } from '@testing-library/react';
import { expect, test } from 'vitest';
import { Glyph } from '../../src/components/glyph.tsx';
import { PersonTag } from '../../src/components/person-tag.tsx';
import { SegmentSwatch } from '../../src/components/segment-swatch.tsx';
import { severities, SeverityCounts, SeverityMark } from '../../src/components/severity-mark.tsx';
import { Stamp, stampWords, type StampState } from '../../src/components/stamp.tsx';

test.each(severities)('%s is told by a shape of its own and by its word', (severity) => {
  const { container } = render(<SeverityMark severity={severity} />);
  expect(container).toHaveTextContent(new RegExp(severity, 'i'));
  expect(container.querySelectorAll('svg path').length).toBeGreaterThan(0);
});

test('no two severities share a shape', () => {
  const shapes = severities.map(
    (severity) => render(<SeverityMark severity={severity} />).container.querySelector('svg')?.innerHTML,
  );
  expect(new Set(shapes).size).toBe(severities.length);
});

test('counts leave out what there is none of, and keep the words for screen readers', () => {
  const { container } = render(<SeverityCounts counts={{ blocking: 3, degrading: 0, advisory: 1 }} />);
  expect(container).toHaveTextContent('3 blocking1 advisory');
});

test('nothing to count is said in a word', () => {
  render(<SeverityCounts counts={{ blocking: 0, degrading: 0, advisory: 0 }} clear="clear" />);
  expect(screen.getByText('clear')).toBeVisible();
});

test('each state has a stamp that is told apart without its colour', () => {
  const states = Object.keys(stampWords) as StampState[];
  const looks = states.map((state) => {
    const { container } = render(<Stamp state={state} />);
    expect(container).toHaveTextContent(stampWords[state]);
    // Colours aside: dashed, plain, double, filled, struck through.
    return /dashed|outline|bg-strip|line-through/.exec(container.innerHTML)?.[0] ?? 'plain';
  });
  expect(new Set(looks).size).toBe(states.length);
});

test('a stamp can name the revision it is on', () => {
  render(<Stamp state="draft" prefix="C" />);
  expect(screen.getByText('C draft')).toBeVisible();
});

test('initials are read as the name, with what the person is doing', () => {
  const { container } = render(<PersonTag initials="NO" name="Noor Okafor" presence="away" />);
  expect(container.querySelector('.sr-only')).toHaveTextContent('Noor Okafor, away');
  expect(screen.getByText('NO')).toHaveAttribute('aria-hidden', 'true');
});

test('a segment is told by its letter; a ninth one wears the first one’s colour again', () => {
  const { container } = render(<SegmentSwatch letter="I" />);
  expect(screen.getByRole('img', { name: 'Segment I' })).toBeInTheDocument();
  expect(container).toHaveTextContent('I');
  expect(container.innerHTML).toContain('var(--seg-a)');
});

test('a glyph takes the colour of the text round it and says nothing', () => {
  const { container } = render(<Glyph name="firewall" />);
  expect(container.querySelector('svg')).toHaveAttribute('aria-hidden', 'true');
  expect(container.innerHTML).toContain('currentColor');
});
