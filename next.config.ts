import type { NextConfig } from "next";

const config: NextConfig = {
  poweredByHeader: false,
  reactStrictMode: true,
  // Native code, and a package whose raw .ts file breaks the build's type check: loaded by Node.js, not bundled.
  serverExternalPackages: ["@libsql/client", "@node-rs/argon2", "image-ssim", "sharp"],
  // Nothing of a project may be shown inside another site's page.
  headers: async () => [
    {
      source: "/:path*",
      headers: [
        { key: "X-Frame-Options", value: "DENY" },
        { key: "X-Content-Type-Options", value: "nosniff" },
        { key: "Referrer-Policy", value: "same-origin" },
      ],
    },
  ],
};

export default config;
