// As in the contract's schema for titles.
const maxTitleCharacters = 80;

/** What is wrong with a name or title, as a sentence with the way out. */
export function titleProblem(label: string, text: string): string | undefined {
  const length = text.trim().length;
  if (length === 0) return `${label} is empty. Type at least one character.`;
  if (length <= maxTitleCharacters) return undefined;
  return `${label} has ${length} characters. Shorten it to ${maxTitleCharacters}.`;
}
