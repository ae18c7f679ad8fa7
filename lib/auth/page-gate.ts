import "server-only";
import { headers } from "next/headers";
import { forbidden, notFound, redirect } from "next/navigation";
import { requireProject, requireUser, type ProjectAccess, type SignedInUser } from "@/lib/auth/gate";
import { PATH_HEADER } from "@/lib/auth/return-path";
import type { Right } from "@/lib/auth/roles";
import { AppError } from "@/lib/errors/app-error";
import { projectIdSchema } from "@/lib/ids";

/**
 * The gate as pages and layouts call it: no session leads to sign-in (and back here), an unknown project or a
 * foreign one to the 404 page, a missing right to the 403 page. Statuses hold only while no Suspense or loading.tsx
 * stands above the caller.
 */
export async function openProject(projectId: string, right: Right): Promise<ProjectAccess> {
  const id = projectIdSchema.safeParse(projectId);
  if (!id.success) notFound();
  return answerPage(() => requireProject(id.data, right));
}

/** Who is signed in; without a session leads to sign-in and back here. */
export async function openSession(): Promise<SignedInUser> {
  return answerPage(requireUser);
}

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

async function signInAddress(): Promise<string> {
  const path = (await headers()).get(PATH_HEADER);
  return path === null ? "/sign-in?ended=1" : `/sign-in?ended=1&to=${encodeURIComponent(path)}`;
}
