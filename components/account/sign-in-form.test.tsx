// @vitest-environment jsdom
import { cleanup, configure, render, screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, beforeEach, expect, test, vi } from "vitest";
import { SignInForm } from "@/components/account/sign-in-form";

/** Stands for the server: next-auth's own client is used as it is. */
function answerSignIn(url: string): void {
  vi.stubGlobal("fetch", async (input: string) => {
    if (input.endsWith("/providers")) return Response.json({ credentials: { id: "credentials", type: "credentials" } });
    if (input.endsWith("/csrf")) return Response.json({ csrfToken: "token" });
    return Response.json({ url }, { status: url.includes("error=") ? 401 : 200 });
  });
}

async function signIn(): Promise<void> {
  const user = userEvent.setup();
  await user.type(screen.getByRole("textbox", { name: "E-mail" }), "mona@stackyard.example");
  await user.type(screen.getByLabelText("Password"), "not the right words");
  await user.click(screen.getByRole("button", { name: "Sign in" }));
}

// A loaded machine takes its time; what is waited for comes or the test fails.
configure({ asyncUtilTimeout: 20_000 });

beforeEach(() => {
  render(<SignInForm returnPath="/projects" />);
});

afterEach(() => {
  cleanup();
  vi.unstubAllGlobals();
});

test("a wrong password is said in plain words and the e-mail stays", async () => {
  answerSignIn("http://localhost/sign-in?error=CredentialsSignin");
  await signIn();
  expect((await screen.findByRole("alert")).textContent).toContain("do not belong together");
  expect(screen.getByRole("textbox", { name: "E-mail" })).toHaveProperty("value", "mona@stackyard.example");
});

test("after ten failures it says how long to wait", async () => {
  answerSignIn("http://localhost/sign-in?error=wait-840");
  await signIn();
  expect((await screen.findByRole("alert")).textContent).toContain("Try again in 14 minutes");
});

test("the password can be looked at while it is typed", async () => {
  const input = screen.getByLabelText("Password");
  expect(input.getAttribute("type")).toBe("password");
  await userEvent.click(screen.getByRole("button", { name: "Show password as text" }));
  expect(input.getAttribute("type")).toBe("text");
});
