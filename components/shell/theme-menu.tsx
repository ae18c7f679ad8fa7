"use client";

import { Contrast } from "lucide-react";
import { useState } from "react";
import { THEME_COOKIE, type Theme } from "@/components/shell/theme";
import { Menu, MenuChoice } from "@/components/ui/menu";

const YEAR_SECONDS = 365 * 24 * 60 * 60;

const CHOICES = [
  { value: "system", label: "As the system" },
  { value: "light", label: "Light" },
  { value: "dark", label: "Dark" },
] as const;

/** Light, dark, or as the system has it; kept in a cookie so that the server's first paint already has it. */
export function ThemeMenu({ initial }: { readonly initial: Theme }) {
  const [theme, setTheme] = useState(initial);

  function choose(next: Theme) {
    setTheme(next);
    document.documentElement.dataset.theme = next;
    document.cookie = `${THEME_COOKIE}=${next}; path=/; max-age=${YEAR_SECONDS}; samesite=lax`;
  }

  return (
    <Menu label="Light or dark" trigger={<Contrast aria-hidden size={18} />}>
      <MenuChoice label="Light or dark" value={theme} choices={CHOICES} onChange={choose} />
    </Menu>
  );
}
