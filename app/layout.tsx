import "./globals.css";
import type { Metadata, Viewport } from "next";
import { cookies } from "next/headers";
import type { ReactNode } from "react";
import { Providers } from "@/app/providers";
import { parseTheme, THEME_COOKIE } from "@/components/shell/theme";

export const metadata: Metadata = {
  title: { default: "Stackyard", template: "%s · Stackyard" },
  description: "Sorts the frames of one very large picture into stacks on a grid, and hands them over for merging.",
  robots: { index: false, follow: false },
};

export const viewport: Viewport = {
  width: "device-width",
  initialScale: 1,
  themeColor: [
    { media: "(prefers-color-scheme: light)", color: "#fcfbf7" },
    { media: "(prefers-color-scheme: dark)", color: "#14181b" },
  ],
};

// The theme comes from a cookie, so that the first paint already has it.
export default async function RootLayout({ children }: { readonly children: ReactNode }) {
  const theme = parseTheme((await cookies()).get(THEME_COOKIE)?.value);
  return (
    <html lang="en" data-theme={theme}>
      <body className="min-h-dvh">
        <Providers>{children}</Providers>
      </body>
    </html>
  );
}
