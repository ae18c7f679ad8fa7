import "server-only";
import { cookies, headers } from "next/headers";
import { forbidden, notFound, redirect } from "next/navigation";
import { cache } from "react";
import { requireProject, requireUser, type ProjectAccess, type SignedInUser } from "@/lib/auth/gate";
import { PATH_HEADER } from "@/lib/auth/return-path";
import type { Right } from "@/lib/auth/roles";
import { sessionCookieName } from "@/lib/auth/session";
import { AppError } from "@/lib/errors/app-error";
import { projectIdSchema } from "@/lib/ids";

/**
 * The gate as pages and layouts call it: no session leads to sign-in (and back here), an unknown project or a
 * foreign one to the 404 page, a missing right to the 403 page. Statuses hold only while no Suspense or loading.tsx
 * stands above the caller. Asked once a request, however often layout and page call it.
 */
export const openProject = cache(
  async (projectId: string, right: Right, evenArchived = false): Promise<ProjectAccess> => {
    const id = projectIdSchema.safeParse(projectId);
    if (!id.success) notFound();
    return answerPage(() => requireProject(id.data, right, { evenArchived }));
  },
);

/** The same for what only decorates a page, such as its title: null wherever the gate would refuse. */
export async function findProjectAccess(projectId: string): Promise<ProjectAccess | null> {
  const id = projectIdSchema.safeParse(projectId);
  if (!id.success) return null;
  try {
    return await requireProject(id.data, "view");
  } catch (error) {
    if (error instanceof AppError) return null;
    throw error;
  }
}

/** Who is signed in; without a session leads to sign-in and back here. */
export const openSession = cache((): Promise<SignedInUser> => answerPage(requireUser));

async function answerPage<Result>(check: () => Promise<Result>): Promise<Result> {
  try {
    return await check();
  } catch (error) {
    if (!(error instanceof AppError)) throw error;
    if (error.code === "unauthenticated") redirect(await signInAddress());
    if (error.code === "not_found") notFound();
    if (error.code === "forbidden") forbidden();
    throw error;
  }
}

/** Sign-in, leading back to the page that was asked for; says that a session ended where there was one. */
export async function signInAddress(): Promise<string> {
  const query = new URLSearchParams();
  if ((await cookies()).has(sessionCookieName())) query.set("ended", "1");
  const path = (await headers()).get(PATH_HEADER);
  if (path !== null) query.set("to", path);
  return `/sign-in?${query}`;
}
