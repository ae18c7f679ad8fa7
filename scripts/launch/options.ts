/** What `npm run launch` was asked for. */
export type LaunchOptions = "launch" | "launch-without-demo" | "remove-demo" | "help";

const OPTIONS: ReadonlyMap<string, LaunchOptions> = new Map([
  ["--no-demo", "launch-without-demo"],
  ["--remove-demo", "remove-demo"],
  ["--help", "help"],
]);

export const HELP = `npm run launch                    start Stackyard; makes the demo project where there is none
npm run launch -- --no-demo       start it without a demo
npm run launch -- --remove-demo   take the demo project and its accounts away, then stop`;

/** @throws Error naming the unknown option */
export function parseLaunchOptions(args: readonly string[]): LaunchOptions {
  const [option, ...more] = args;
  if (option === undefined) return "launch";
  const found = OPTIONS.get(option);
  if (!found || more.length > 0) throw new Error(`Unknown option: ${args.join(" ")}\n${HELP}`);
  return found;
}
