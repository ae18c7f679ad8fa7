"use server";

import { revalidatePath } from "next/cache";
import { headers } from "next/headers";
import { z } from "zod";
import { addressOf } from "@/lib/auth/client-address";
import { requireUser } from "@/lib/auth/gate";
import { parseForm, runForm, textOf } from "@/lib/http/form-action";
import type { FormState } from "@/lib/http/form-state";
import { sessionIdSchema } from "@/lib/ids";
import { personNameSchema } from "@/lib/people/schema";
import { changeName, changePassword, endOtherSessions, endSession } from "@/lib/people/writes";

export async function changeNameForm(_before: FormState, form: FormData): Promise<FormState> {
  return runForm(form, async () => {
    const user = await requireUser();
    const { name } = parseForm(z.object({ name: personNameSchema }), { name: textOf(form, "name") });
    await changeName(user, name);
    revalidatePath("/", "layout");
    return "Your new name is saved.";
  });
}

export async function changePasswordForm(_before: FormState, form: FormData): Promise<FormState> {
  return runForm(form, async () => {
    const user = await requireUser();
    const address = addressOf(Object.fromEntries(await headers()));
    await changePassword(user, { current: textOf(form, "current"), next: textOf(form, "next"), address });
    revalidatePath("/account");
    return "Your new password is in place. Everywhere else you are signed out.";
  });
}

export async function endSessionForm(_before: FormState, form: FormData): Promise<FormState> {
  return runForm(form, async () => {
    const user = await requireUser();
    const { sessionId } = parseForm(z.object({ sessionId: sessionIdSchema }), { sessionId: textOf(form, "sessionId") });
    await endSession(user, sessionId);
    revalidatePath("/account");
    return "Signed out there.";
  });
}

export async function endOtherSessionsForm(_before: FormState, form: FormData): Promise<FormState> {
  return runForm(form, async () => {
    await endOtherSessions(await requireUser());
    revalidatePath("/account");
    return "You are signed out everywhere else.";
  });
}
