import type { Config } from "tailwindcss";

/** Names for the tokens of app/globals.css. Only these colours exist: a class for any other does nothing. */
const config: Config = {
  content: ["./app/**/*.{ts,tsx}", "./components/**/*.{ts,tsx}"],
  theme: {
    colors: {
      transparent: "transparent",
      current: "currentColor",
      paper: "var(--paper)",
      tray: "var(--tray)",
      ink: "var(--ink)",
      quiet: "var(--quiet)",
      hairline: "var(--hairline)",
      line: "var(--line)",
      well: "var(--well)",
      petrol: { DEFAULT: "var(--petrol)", on: "var(--petrol-on)" },
      ochre: { DEFAULT: "var(--ochre)", wash: "var(--ochre-wash)", on: "var(--ochre-on)" },
      madder: { DEFAULT: "var(--madder)", wash: "var(--madder-wash)", on: "var(--madder-on)" },
    },
    fontFamily: {
      sans: ["Atkinson Hyperlegible Next Variable", "Arial", "sans-serif"],
      mono: ["Atkinson Hyperlegible Mono Variable", "DejaVu Sans Mono", "monospace"],
    },
    fontSize: {
      sm: ["0.875rem", { lineHeight: "1.25rem" }],
      base: ["1rem", { lineHeight: "1.5rem" }],
      lg: ["1.125rem", { lineHeight: "1.625rem" }],
      xl: ["1.375rem", { lineHeight: "1.75rem" }],
      "2xl": ["1.75rem", { lineHeight: "2.125rem" }],
      "3xl": ["2.25rem", { lineHeight: "2.5rem" }],
    },
    borderRadius: { none: "0", full: "9999px" },
    boxShadow: { none: "none", float: "var(--float)" },
    extend: {},
  },
};

export default config;
