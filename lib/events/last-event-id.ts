/** `Last-Event-ID` of a page that resumes; null where it begins, or sends what we never sent. */
export function lastEventIdOf(headers: Headers): number | null {
  const sent = headers.get("last-event-id");
  return sent !== null && /^\d{1,15}$/.test(sent) ? Number(sent) : null;
}
