// `npm run launch`: everything up to a running product. Plain Node.js up to the point where dependencies are there.
import { fail, requireNode, root } from "./setup/project.mjs";

requireNode();
process.chdir(root);
const { ensureDependencies } = await import("./setup/dependencies.mjs");
await ensureDependencies();
const { register } = await import("tsx/esm/api");
register();
const { launch } = await import("./launch/launch.ts");
try {
  process.exitCode = await launch(process.argv.slice(2));
} catch (error) {
  fail(error instanceof Error ? error.message : String(error));
}
