// Loaded into web and worker with --import: they end when the launching process is gone, however it went, so that
// nothing is left behind on the port.
const GRACE_MS = 15_000;

if (process.channel) {
  process.on("disconnect", () => {
    setTimeout(() => process.exit(1), GRACE_MS).unref();
    process.kill(process.pid, "SIGTERM");
  });
  process.channel.unref();
}
