/** Every handle is described by this one hidden text. */
export const GRIP_HELP_ID = "grip-help";
export const GRIP_HELP =
  "Enter or Space picks it up, arrow keys move it from tile to tile, Enter puts it down, Escape puts it back.";
