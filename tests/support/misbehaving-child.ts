// Stands in the place of the program that reads pictures, and does what damaged pictures can make it do. The task's
// path says what: "crash", "hang", "exhaust" memory, "slow" for a second, or anything else to be answered.
process.on("disconnect", () => process.exit());
process.on("message", ({ task }: { task: { path: string } }) => {
  if (task.path.endsWith("crash")) process.kill(process.pid, "SIGSEGV");
  if (task.path.endsWith("hang")) for (;;);
  if (task.path.endsWith("exhaust")) {
    const held: number[][] = [];
    for (;;) held.push(new Array<number>(1_000_000).fill(held.length));
  }
  const answer = () =>
    process.send?.({ type: "done", picture: { sha256: String(process.pid), bytes: 1, mediaType: "image/jpeg" } });
  setTimeout(answer, task.path.endsWith("slow") ? 1000 : 0);
});
process.send?.({ type: "ready" });
