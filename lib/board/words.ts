/** Numbers and names as people read them on the board. Pure; plain spaces, so that names can be spoken and searched. */

/** "1 question", "3 questions", "no questions". */
export function countOf(count: number, one: string, many = `${one}s`): string {
  if (count === 0) return `no ${many}`;
  return count === 1 ? `1 ${one}` : `${groupDigits(count)} ${many}`;
}

/** Thousands kept apart by a space: 3 800. */
export function groupDigits(value: number): string {
  return String(Math.round(value)).replace(/\B(?=(\d{3})+$)/g, " ");
}

/** @param fraction - 0.333 is "33 %"; null is "not measured" */
export function percent(fraction: number | null): string {
  return fraction === null ? "not measured" : `${Math.round(fraction * 100)} %`;
}

/** A pause: "0.4 s", "15 s", "2 min 10 s", "1 h 4 min". @param seconds - 0 or more; null is "pause unknown" */
export function pauseText(seconds: number | null): string {
  if (seconds === null) return "pause unknown";
  if (seconds < 9.95) return `${trimZero(seconds.toFixed(1))} s`;
  const whole = Math.round(seconds);
  if (whole < 60) return `${whole} s`;
  const minutes = Math.floor(whole / 60);
  if (minutes < 60) return joined(minutes, "min", whole % 60, "s");
  return joined(Math.floor(minutes / 60), "h", minutes % 60, "min");
}

/** Exposure time: "1/250 s" up to a third of a second, "1.3 s" above. */
export function exposureText(seconds: number): string {
  if (seconds > 0 && seconds <= 0.3) return `1/${Math.round(1 / seconds)} s`;
  return `${trimZero(seconds.toFixed(1))} s`;
}

/** How far a frame lies from its reference. @param shift - full-size px */
export function distanceText(shift: { readonly xPx: number; readonly yPx: number } | null): string {
  return shift === null ? "not measured" : `${groupDigits(Math.hypot(shift.xPx, shift.yPx))} px`;
}

/** Clock time of a local time text: "09:41:12"; null where there is none. */
export function clockText(local: string | null): string | null {
  return local?.slice(11, 19) ?? null;
}

/** "512 B", "3.4 MB", "1.2 GB": powers of ten, as cards and disks are sold. */
export function bytesText(bytes: number): string {
  const units = ["B", "kB", "MB", "GB", "TB"];
  let value = bytes;
  let unit = 0;
  while (value >= 999.5 && unit < units.length - 1) {
    value /= 1000;
    unit += 1;
  }
  return `${unit === 0 || value >= 99.5 ? Math.round(value) : value.toFixed(1)} ${units[unit]}`;
}

function joined(big: number, bigUnit: string, small: number, smallUnit: string): string {
  return small === 0 ? `${big} ${bigUnit}` : `${big} ${bigUnit} ${small} ${smallUnit}`;
}

/** At most one decimal, none where it is zero: 8, 5.6. */
export function trimmed(value: number): string {
  return trimZero(value.toFixed(1));
}

function trimZero(text: string): string {
  return text.replace(/\.0$/, "");
}
