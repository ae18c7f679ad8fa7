import type { Manifest, ManifestFile, ManifestFrame } from "./manifest-types";

type Cell = string | number | boolean | null;

const COLUMNS: readonly (readonly [string, (frame: ManifestFrame, file: ManifestFile, at: number) => Cell])[] = [
  ["tile", (frame) => frame.tile],
  ["row", (frame) => frame.row],
  ["column", (frame) => frame.column],
  ["take", (frame) => frame.take],
  ["order", (frame) => frame.order],
  ["folder", (_, file) => file.folder],
  ["file", (_, file) => file.name],
  ["file of frame", (_, __, at) => at + 1],
  ["in use", (frame) => (frame.inUse ? "yes" : "no")],
  ["set aside", (frame) => frame.setAside],
  ["layer opacity %", (frame) => frame.layerOpacity],
  // One cell: an offset of its own would begin with + or -, as formulas do.
  ["taken at", ({ takenAt }) => (takenAt ? `${takenAt.local}${takenAt.offset ?? ""}` : null)],
  ["camera", (frame) => frame.camera.model],
  ["serial", (frame) => frame.camera.serial],
  ["lens", (frame) => frame.camera.lens],
  ["exposure s", (frame) => frame.exposure.seconds],
  ["aperture", (frame) => frame.exposure.aperture],
  ["iso", (frame) => frame.exposure.iso],
  ["focal length mm", (frame) => frame.exposure.focalLength],
  ["width px", (frame) => frame.width],
  ["height px", (frame) => frame.height],
  ["laplacian variance", (frame) => frame.sharpness.laplacianVariance],
  ["sharpness in stack", (frame) => frame.sharpness.relative],
  ["shift x px", (frame) => frame.shift?.x ?? null],
  ["shift y px", (frame) => frame.shift?.y ?? null],
  ["placed by", (frame) => frame.placedBy],
  ["bytes", (_, file) => file.bytes],
  ["sha256", (_, file) => file.sha256],
  ["stack id", (frame) => frame.stack],
  ["frame id", (frame) => frame.id],
];

/** A manifest's frames as a table, one row a file: text/csv; header=present. Source: RFC 4180. */
export function manifestToCsv(manifest: Manifest): string {
  const rows = manifest.frames.flatMap((frame) =>
    frame.files.map((file, at) => COLUMNS.map(([, read]) => read(frame, file, at))),
  );
  return writeCsv([COLUMNS.map(([name]) => name), ...rows]);
}

/**
 * Rows as CSV: CRLF after each, cells in quotes where they hold a comma, a quote or a line break.
 * Text that a spreadsheet would run as a formula gets an apostrophe before it, after a semicolon too: where the comma is
 * the decimal sign, spreadsheets part cells there.
 * Source: RFC 4180; formulas: OWASP "CSV Injection" (from memory).
 */
export function writeCsv(rows: readonly (readonly Cell[])[]): string {
  return rows.map((cells) => `${cells.map(writeCell).join(",")}\r\n`).join("");
}

function writeCell(cell: Cell): string {
  if (cell === null) return "";
  if (typeof cell !== "string") return String(cell);
  const text = cell.replace(/(^|;)(?=[=+\-@\t\r\n])/g, "$1'");
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
