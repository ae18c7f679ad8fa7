import coreWebVitals from "eslint-config-next/core-web-vitals";
import typescript from "eslint-config-next/typescript";

/**
 * Structure: which folder may import what (docs: DEVELOPERS.md). A later block replaces an earlier one for the files it
 * names, so each block says all that holds for them.
 */
const DATABASE = {
  group: ["@/db/*", "@/db/**", "drizzle-orm", "drizzle-orm/*", "@libsql/client"],
  message: "Only reads.ts, writes.ts, lib/jobs/queue, lib/events and lib/auth speak to the database.",
};
const UP = { group: ["@/app/**", "@/components/**"], message: "lib and db never import from app or components." };
const SHARP = { group: ["sharp"], message: "Only lib/imaging decodes pictures." };
const EXIF = { group: ["exifr", "exifr/*"], message: "Only lib/metadata reads EXIF." };
const SIMILARITY = { group: ["image-ssim"], message: "Only lib/imaging loads image-ssim." };
const SERVER_ONLY = {
  group: [
    "@/lib/**/reads",
    "@/lib/**/writes",
    "@/lib/**/*-reads",
    "@/lib/**/*-writes",
    "@/lib/auth/gate",
    "@/lib/auth/session",
    "@/lib/env",
    "@/lib/imaging/**",
    "@/lib/intake/**",
    "@/lib/jobs/**",
    "@/lib/storage/**",
    "node:*",
  ],
  allowTypeImports: true,
  message: "This runs in the browser: import schema, types, queries, mutations and pure files only.",
};
const IMPURE = {
  group: [
    "next",
    "next/*",
    "react",
    "react-dom",
    "server-only",
    "@tanstack/*",
    "node:*",
    "@/lib/**/reads",
    "@/lib/**/writes",
    "@/lib/**/*-reads",
    "@/lib/**/*-writes",
    "@/lib/auth/gate",
    "@/lib/auth/session",
    "@/lib/env",
    "@/lib/http/**",
    "@/lib/imaging/**",
    "@/lib/intake/**",
    "@/lib/jobs/**",
    "@/lib/storage/**",
  ],
  message: "Pure computation: what it needs from outside comes in as an argument.",
};

/** Files that compute and nothing else. */
const PURE_FILES = [
  "lib/analysis/**/*.ts",
  "lib/sorting/**/*.ts",
  "lib/board/!(*reads|*writes|*queries|schema|mutations|*.test).ts",
  "lib/handover/!(reads|writes|schema|queries).ts",
  "lib/auth/roles.ts",
];
/** Everything that may speak to the database. This list may only shrink. */
const DATABASE_FILES = [
  "lib/**/{reads,writes}.ts",
  "lib/**/*-{reads,writes}.ts",
  "lib/jobs/queue.ts",
  "lib/events/{publish,stream}.ts",
  "lib/auth/*.ts",
];

const CLOCK_AND_CHANCE = [
  {
    selector: "CallExpression[callee.object.name='Date'][callee.property.name='now']",
    message: "Time is an argument.",
  },
  { selector: "NewExpression[callee.name='Date'][arguments.length=0]", message: "Time is an argument." },
  {
    selector: "CallExpression[callee.object.name='Math'][callee.property.name='random']",
    message: "Chance is an argument.",
  },
];
const ENVIRONMENT = {
  selector: "MemberExpression[object.name='process'][property.name='env']",
  message: "lib/env.ts is the only reader of the environment.",
};

/** @param {...object} patterns */
const forbidImports = (...patterns) => ({
  "@typescript-eslint/no-restricted-imports": ["error", { patterns }],
});

/** A rule of our own: names of files and folders are kebab-case (Next's own brackets and underscores aside). */
const kebabCase = {
  create: (context) => ({
    Program(node) {
      const name = context.filename.split("/").at(-1) ?? "";
      if (!/^[a-z0-9]+(-[a-z0-9]+)*(\.[a-z0-9-]+)+$/.test(name)) {
        context.report({ node, message: `File names are kebab-case: ${name}` });
      }
    },
  }),
};

const config = [
  {
    ignores: [".next*/**", "node_modules/**", "storage/**", "test-results/**", "playwright-report/**", "next-env.d.ts"],
  },
  ...coreWebVitals,
  ...typescript,
  {
    files: ["**/*.{ts,tsx,mjs}"],
    plugins: { stackyard: { rules: { "kebab-case": kebabCase } } },
    rules: {
      "stackyard/kebab-case": "error",
      "no-else-return": "error",
      eqeqeq: "error",
      "no-control-regex": "error",
      // For the React compiler, which is not used here.
      "react-hooks/incompatible-library": "off",
      "max-lines": ["error", { max: 300, skipBlankLines: true, skipComments: true }],
      "no-restricted-syntax": ["error", ENVIRONMENT],
    },
  },
  {
    files: ["**/*.{ts,tsx}"],
    languageOptions: { parserOptions: { projectService: true } },
    rules: {
      "@typescript-eslint/no-explicit-any": "error",
      "@typescript-eslint/no-non-null-assertion": "error",
      "@typescript-eslint/no-floating-promises": "error",
      "@typescript-eslint/no-unused-vars": ["error", { argsIgnorePattern: "^_", varsIgnorePattern: "^_" }],
      "@typescript-eslint/consistent-type-imports": ["error", { disallowTypeAnnotations: false }],
    },
  },
  { files: ["lib/**/*.ts", "db/**/*.ts", "worker.ts"], rules: forbidImports(DATABASE, UP, SHARP, EXIF, SIMILARITY) },
  { files: ["app/**/*.{ts,tsx}"], rules: forbidImports(DATABASE, SHARP, EXIF, SIMILARITY) },
  { files: ["components/**/*.{ts,tsx}"], rules: forbidImports(DATABASE, SHARP, EXIF, SIMILARITY, SERVER_ONLY) },
  {
    files: ["lib/**/{schema,queries,mutations}.ts", "lib/http/fetch-json.ts"],
    rules: forbidImports(DATABASE, UP, SHARP, EXIF, SIMILARITY, SERVER_ONLY),
  },
  { files: ["db/**/*.ts", ...DATABASE_FILES], rules: forbidImports(UP, SHARP, EXIF, SIMILARITY) },
  { files: ["lib/imaging/**/*.ts"], rules: forbidImports(DATABASE, UP, EXIF) },
  { files: ["lib/metadata/**/*.ts"], rules: forbidImports(DATABASE, UP, SHARP, SIMILARITY) },
  {
    files: PURE_FILES,
    rules: {
      ...forbidImports(DATABASE, UP, SHARP, EXIF, SIMILARITY, IMPURE),
      "no-restricted-syntax": ["error", ENVIRONMENT, ...CLOCK_AND_CHANCE],
    },
  },
  {
    // Programs and their tests: they start things, and look at what came of it.
    files: [
      "lib/env.ts",
      "instrumentation.ts",
      "scripts/**/*.{ts,mjs}",
      "tests/**/*.ts",
      "*.config.{ts,mjs}",
      "**/*.test.{ts,tsx}",
    ],
    rules: { "no-restricted-syntax": "off" },
  },
  {
    files: ["**/*.test.{ts,tsx}", "tests/**/*.{ts,tsx}"],
    rules: {
      "@typescript-eslint/no-restricted-imports": "off",
      "max-lines": "off",
      // Called once at the top of a test file, not in a component.
      "react-hooks/rules-of-hooks": "off",
    },
  },
  {
    files: ["**/{index,misc,utils,helpers,common}.{ts,tsx}"],
    rules: {
      "no-restricted-syntax": [
        "error",
        { selector: "Program", message: "No barrels and no catch-all files: name the file for what it does." },
      ],
    },
  },
];

export default config;
