import type { TakenAt } from "@/lib/metadata/types";

/** The three EXIF texts that tell when a frame was taken; null where absent. */
export interface TakenAtTexts {
  readonly dateTime: string | null;
  readonly subSecond: string | null;
  readonly offset: string | null;
}

const DATE_TIME = /^(\d{4})[:-](\d{2})[:-](\d{2})[ T](\d{2}):(\d{2}):(\d{2})$/;
const OFFSET = /^([+-])(\d{2}):(\d{2})$/;
/** Offsets in use run from -12:00 to +14:00. Minutes. */
const LARGEST_OFFSET_MINUTES = 14 * 60;

/**
 * Reads when a frame was taken.
 * @param texts - DateTimeOriginal "YYYY:MM:DD HH:MM:SS", SubSecTimeOriginal (digits of the fraction: "7" is 0.7 s,
 *   "07" is 0.07 s, padded with blanks or not), OffsetTimeOriginal "+HH:MM"
 * @returns local time and offset apart; null for blanks, the year 0000 and dates that do not exist
 * Edges: the machine's time zone has no part in it; times in the future are kept, clocks are often wrong.
 * Source: Exif 2.31 (CIPA DC-008), tags 0x9003, 0x9291, 0x9011.
 * @example parseTakenAt({ dateTime: "2019:11:20 23:07:39", subSecond: "70", offset: "+09:00" })
 */
export function parseTakenAt(texts: TakenAtTexts): TakenAt | null {
  const match = DATE_TIME.exec((texts.dateTime ?? "").trim());
  if (!match) return null;
  const [year = 0, month = 0, day = 0, hour = 0, minute = 0, second = 0] = match.slice(1).map(Number);
  const wholeMs = Date.UTC(year, month - 1, day, hour, minute, second);
  // Date.UTC rolls the 31st of February over and moves years under 100: what does not come back is no date.
  const local = new Date(wholeMs).toISOString().slice(0, 19);
  if (year < 1000 || local !== `${match.slice(1, 4).join("-")}T${match.slice(4, 7).join(":")}`) return null;
  const fraction = readFraction(texts.subSecond);
  return {
    local: fraction === "" ? local : `${local}.${fraction}`,
    localMs: wholeMs + Math.round(Number(`0.${fraction || "0"}`) * 1000),
    hasFraction: fraction !== "",
    offsetMinutes: readOffset(texts.offset),
  };
}

function readFraction(text: string | null): string {
  const digits = (text ?? "").trim();
  return /^\d{1,9}$/.test(digits) ? digits : "";
}

function readOffset(text: string | null): number | null {
  const match = OFFSET.exec((text ?? "").trim());
  if (!match) return null;
  const hours = Number(match[2]);
  const minutes = Number(match[3]);
  const total = hours * 60 + minutes;
  if (minutes > 59 || total > LARGEST_OFFSET_MINUTES) return null;
  return (match[1] === "-" ? -total : total) + 0;
}
