"use client";

import { ChevronDown } from "lucide-react";
import Link from "next/link";
import { signOut } from "next-auth/react";
import { Menu, MenuItem, MenuLine, MenuLink } from "@/components/ui/menu";

/** The signed-in person's own pages, and the way out. */
export function AccountMenu({ name, email }: { readonly name: string; readonly email: string }) {
  return (
    <Menu
      label={`${name}: account and sign out`}
      trigger={
        <>
          <span className="max-w-40 truncate max-sm:max-w-24">{name}</span>
          <ChevronDown aria-hidden size={16} />
        </>
      }
    >
      <p className="px-3 pt-1 pb-2 text-sm text-quiet">{email}</p>
      <MenuLink>
        <Link href="/projects">Projects</Link>
      </MenuLink>
      <MenuLink>
        <Link href="/account">Account</Link>
      </MenuLink>
      <MenuLine />
      <MenuItem onSelect={() => void signOut({ callbackUrl: "/sign-in?out=1" })}>Sign out</MenuItem>
    </Menu>
  );
}
