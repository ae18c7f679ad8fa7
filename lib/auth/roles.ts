export const ROLES = ["lead", "editor", "viewer"] as const;
export type Role = (typeof ROLES)[number];

/**
 * view: every page, preview, manifest, CSV; comment.
 * edit: uploads, board commands, settle, originals, packages.
 * manage: settings, members, division, withdraw, archive, delete.
 */
export type Right = "view" | "edit" | "manage";

const RIGHTS: Record<Role, readonly Right[]> = {
  lead: ["view", "edit", "manage"],
  editor: ["view", "edit"],
  viewer: ["view"],
};

export function allows(role: Role, right: Right): boolean {
  return RIGHTS[role].includes(right);
}
