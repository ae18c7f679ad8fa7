/** Runs once when the web process starts, before it answers. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME !== "nodejs") return;
  const { keepParametersOutOfLogs } = await import("@/lib/errors/logs");
  keepParametersOutOfLogs();
  const { trustForwarding } = await import("@/lib/auth/trust-forwarding");
  trustForwarding();
  const { prepareStorage } = await import("@/lib/storage/paths");
  await prepareStorage();
}
