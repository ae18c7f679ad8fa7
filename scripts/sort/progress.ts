import type { WriteStream } from "node:tty";

export interface Progress {
  say(text: string): void;
  end(): void;
}

/** Lines on a terminal come this often at most; in a log file one in ten of them. */
const LEAST_INTERVAL_MS = 200;
const LEAST_LOG_INTERVAL_MS = 2000;

/** One line that is written over on a terminal; now and then a line of its own elsewhere. */
export function makeProgress(stream: WriteStream | NodeJS.WriteStream): Progress {
  let last = -Infinity;
  const interval = stream.isTTY ? LEAST_INTERVAL_MS : LEAST_LOG_INTERVAL_MS;
  return {
    say(text) {
      const now = performance.now();
      if (now - last < interval) return;
      last = now;
      stream.write(stream.isTTY ? `\r\u001b[K${text}` : `${text}\n`);
    },
    end() {
      if (stream.isTTY) stream.write("\r\u001b[K");
    },
  };
}
