// A process with a pool of one child, to be killed by a test. Tells the child's process id.
import { fileURLToPath } from "node:url";

import { createAnalysisPool } from "@/lib/imaging/analysis-pool";

const childPath = fileURLToPath(new URL("./misbehaving-child.ts", import.meta.url));
const pool = createAnalysisPool({ size: 1, childPath });
const none = { previewPath: null, thumbnailPath: null, registrationPath: null };
const { sha256 } = await pool.analyse({ path: "any", ...none });
process.send?.(Number(sha256));
setInterval(() => undefined, 1000);
