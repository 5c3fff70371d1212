import { sentenceCase } from './wording.ts';

/** Text as the start of a sentence: words get a capital, names written like fw-gul, lan1 or 10.1.0.1 stay as they are. */
export const sentenceStart = (text: string): string =>
  /[-_.0-9]/.test(text.split(' ')[0]!) ? text : sentenceCase(text);
