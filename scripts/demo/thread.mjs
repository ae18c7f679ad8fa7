// Where a drawing thread begins: `--import tsx` does not reach threads, so TypeScript is set up here.
import { tsImport } from "tsx/esm/api";

await tsImport("./take-frames-thread.ts", import.meta.url);
