/** An id that an entry may take: the stem, or the stem with the lowest number that makes it new. */
export const unusedId = (taken: object, stem: string): string => {
  const short = stem.slice(0, 60);
  let id = short;
  for (let n = 2; Object.hasOwn(taken, id); n += 1) id = `${short}-${n}`;
  return id;
};
