/** Stands in no single key: ids, names and words have no line breaks. */
const BREAK = "\n";
const MARK = " several";

/** Key of many doubts asked as one question: of the same doubts it is the same, whatever their order. */
export function gatheredKey(kind: string, keys: readonly string[]): string {
  return [`${kind}${MARK}`, ...[...keys].sort()].join(BREAK);
}

/** Whether a question stands for many doubts. */
export function isGathered(key: string): boolean {
  return key.includes(`${MARK}${BREAK}`);
}

/** The doubts that an answered question answered: all of them stay answered, in whatever company they come again. */
export function doubtsOf(key: string): string[] {
  return isGathered(key) ? key.split(BREAK).slice(1) : [key];
}
