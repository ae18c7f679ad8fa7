/**
 * Has the server forget an upload that broke off (tus 1.0.0, termination).
 * @param url - the upload's address, as the list gives it
 * @throws Error in plain words where the server refuses or does not answer
 */
export async function cancelBrokenUpload(url: string): Promise<void> {
  const response = await fetch(url, { method: "DELETE", headers: { "Tus-Resumable": "1.0.0" } }).catch(() => null);
  if (response === null) throw new Error("No answer from the server. Check the connection and try again.");
  // Gone already is what was wanted.
  if (!response.ok && response.status !== 404 && response.status !== 410) {
    throw new Error(`The server answered ${response.status}. Try again.`);
  }
}
