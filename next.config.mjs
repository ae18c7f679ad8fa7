const isDevelopment = process.env.NODE_ENV === "development";

// Next's own inline scripts and the theme's carry no nonce where a page is prerendered, hence 'unsafe-inline' for
// scripts; nothing of another site is loaded, sent to, or allowed to frame us. blob: and data: are previews of files
// not yet sent. Development needs eval and web sockets for hot reload.
const contentSecurityPolicy = [
  "default-src 'self'",
  `script-src 'self' 'unsafe-inline'${isDevelopment ? " 'unsafe-eval'" : ""}`,
  "style-src 'self' 'unsafe-inline'",
  "img-src 'self' blob: data:",
  "font-src 'self'",
  `connect-src 'self'${isDevelopment ? " ws:" : ""}`,
  "object-src 'none'",
  "base-uri 'self'",
  "form-action 'self'",
  "frame-ancestors 'none'",
].join("; ");

/** @type {import("next").NextConfig} */
const nextConfig = {
  distDir: process.env.NEXT_DIST_DIR || ".next",
  poweredByHeader: false,
  reactStrictMode: true,
  serverExternalPackages: ["sharp", "@libsql/client", "image-ssim", "@node-rs/argon2"],
  // `npm run check` does it, for the tests too; whoever launches a fresh clone need not wait for it once more.
  typescript: { ignoreBuildErrors: true },
  // forbidden() answers 403 with app/forbidden.tsx.
  experimental: { authInterrupts: true },
  headers: async () => [
    {
      source: "/:path*",
      headers: [
        { key: "content-security-policy", value: contentSecurityPolicy },
        { key: "x-content-type-options", value: "nosniff" },
        { key: "x-frame-options", value: "DENY" },
        { key: "referrer-policy", value: "same-origin" },
        { key: "permissions-policy", value: "camera=(), microphone=(), geolocation=()" },
        { key: "cross-origin-opener-policy", value: "same-origin" },
      ],
    },
  ],
};

export default nextConfig;
