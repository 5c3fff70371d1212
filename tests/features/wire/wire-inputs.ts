import { readTexts, textsFrom, type WireTexts } from '../../../src/features/wire/wire-fields.ts';
import {
  wireFigures,
  type FiguresAnswer,
  type WireFigures,
} from '../../../src/features/wire/wire-figures.ts';

/** What the calculator answers when these differ from how it starts. */
export function answerFor(changes: Partial<WireTexts>): FiguresAnswer {
  const read = readTexts({ ...textsFrom(() => ''), ...changes });
  return read.ok ? wireFigures(read.inputs) : read;
}

export function figuresFor(changes: Partial<WireTexts>): WireFigures {
  const answer = answerFor(changes);
  if (!answer.ok) throw new Error(JSON.stringify(answer.problems));
  return answer.figures;
}
