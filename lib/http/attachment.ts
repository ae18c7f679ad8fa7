/**
 * `Content-Disposition` that saves an answer under a name in any script (RFC 6266, with RFC 8187's `filename*`).
 * @param name - what a person called it; what no file system takes is replaced
 * @param ending - with its dot; empty where the name has its own
 */
export function attachment(name: string, ending: string): string {
  const safe = name.replace(/[\p{Cc}\p{Cs}/\\:*?"<>|]+/gu, "_").trim() || "project";
  const plain = `${safe}${ending}`.replace(/[^\x20-\x7e]|%/g, "_");
  const encoded = encodeURIComponent(`${safe}${ending}`).replace(/['()*]/g, (letter) => `%${hex(letter)}`);
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}

function hex(letter: string): string {
  return letter.charCodeAt(0).toString(16).toUpperCase();
}
