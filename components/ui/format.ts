const UNITS = ["bytes", "kB", "MB", "GB", "TB"] as const;

/** Bytes with a decimal unit (SI, steps of 1 000) and two or three figures: "0 bytes", "640 kB", "3.2 GB". */
export function formatBytes(bytes: number): string {
  let value = bytes;
  let unit = 0;
  // 999.5 would be written as 1 000 of the smaller unit.
  while (value >= 999.5 && unit < UNITS.length - 1) {
    value /= 1000;
    unit += 1;
  }
  const digits = unit > 0 && value < 9.95 ? 1 : 0;
  return `${value.toFixed(digits)} ${UNITS[unit] ?? ""}`;
}

/** "1 question", "3 questions", "12 400 frames": a number of things, said as things. */
export function countOf(count: number, one: string, many = `${one}s`): string {
  return `${groupDigits(count)} ${count === 1 ? one : many}`;
}

/** Thin spaces between thousands from five digits on (ISO 80000-1, 7.3.1; four digits stay together). */
export function groupDigits(count: number): string {
  const digits = String(count);
  return digits.length < 5 ? digits : digits.replace(/\B(?=(\d{3})+$)/g, "\u202f");
}

/** A fraction as per cent with at most one decimal: 0.333 is "33.3". */
export function asPerCent(fraction: number): string {
  return String(Math.round(fraction * 1000) / 10);
}
