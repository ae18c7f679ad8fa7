import { cookies } from "next/headers";
import Link from "next/link";
import type { ReactNode } from "react";
import { AccountMenu } from "@/components/shell/account-menu";
import { Mark } from "@/components/shell/mark";
import { parseTheme, THEME_COOKIE } from "@/components/shell/theme";
import { ThemeMenu } from "@/components/shell/theme-menu";

interface SiteHeaderProps {
  /** Null: nobody is signed in. */
  readonly person: { readonly name: string; readonly email: string } | null;
  /** Beside the mark: the project's name and what belongs to it. */
  readonly children?: ReactNode;
  /** At the right, before the menus. */
  readonly beside?: ReactNode;
}

/** The line at the top of every page. */
export async function SiteHeader({ person, children, beside }: SiteHeaderProps) {
  const theme = parseTheme((await cookies()).get(THEME_COOKIE)?.value);
  return (
    <header className="flex min-h-14 flex-wrap items-center gap-x-5 gap-y-1 px-4 py-2 sm:px-5">
      <Link
        href={person ? "/projects" : "/sign-in"}
        className="flex min-h-7 items-center gap-2.5 text-lg font-bold tracking-tight pointer-coarse:min-h-11"
      >
        <Mark className="size-6" />
        <span className="max-[22rem]:sr-only">Stackyard</span>
      </Link>
      {children !== undefined && <div className="min-w-0 max-sm:order-last max-sm:w-full">{children}</div>}
      <div className="ml-auto flex flex-wrap items-center justify-end gap-1">
        {beside}
        <ThemeMenu initial={theme} />
        {person && <AccountMenu name={person.name} email={person.email} />}
      </div>
    </header>
  );
}
