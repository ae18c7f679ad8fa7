/**
 * Takes the bound values out of a failed query's error, in place: they may be e-mails or hashes of passwords, and the
 * query without them says what failed. Causes are looked through as well. Anything else is left as it is.
 */
export function withoutParameters(value: unknown): unknown {
  for (let error = value; error instanceof Error; error = error.cause) {
    if (!isFailedQuery(error)) continue;
    const { message, stack } = error;
    error.message = `Failed query: ${error.query}`;
    error.params = [];
    if (stack !== undefined) error.stack = stack.replace(message, () => error.message);
  }
  return value;
}

/** Drizzle's `DrizzleQueryError`, by its shape: this file is of both sides, and the database only of one. */
function isFailedQuery(error: Error): error is Error & { query: string; params: unknown } {
  return "query" in error && typeof error.query === "string" && "params" in error;
}

/** From here on whatever this process logs, libraries included, is without the bound values of failed queries. */
export function keepParametersOutOfLogs(): void {
  for (const method of ["error", "warn", "log"] as const) {
    const write = console[method].bind(console);
    console[method] = (...values: unknown[]) => write(...values.map(withoutParameters));
  }
}
