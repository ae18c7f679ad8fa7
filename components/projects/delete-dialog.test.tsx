// @vitest-environment jsdom
import { cleanup, configure, render, screen } from "@testing-library/react";
import userEvent from "@testing-library/user-event";
import { afterEach, expect, test, vi } from "vitest";
import { DeleteDialog } from "@/components/projects/delete-dialog";
import type { FormState } from "@/lib/http/form-state";

const PROJECT = { id: "p1", name: "Harbour front", frames: 108, bytes: 3_100_000_000 };

// A loaded machine takes its time; what is waited for comes or the test fails.
configure({ asyncUtilTimeout: 20_000 });

afterEach(cleanup);

test("it says what goes and what that frees", () => {
  render(<DeleteDialog project={PROJECT} action={vi.fn()} isOpen onOpenChange={vi.fn()} />);
  const dialog = screen.getByRole("dialog", { name: "Delete Harbour front?" });
  expect(dialog.textContent).toContain("108 frames");
  expect(dialog.textContent).toContain("3.1\u00a0GB");
});

test("a name typed wrongly is refused at its field, and what was typed stays", async () => {
  const action = async (_before: FormState, form: FormData): Promise<FormState> => ({
    status: "refused",
    message: null,
    fields: { confirmation: "Type the project's name exactly as it is written." },
    values: { confirmation: String(form.get("confirmation")) },
  });
  render(<DeleteDialog project={PROJECT} action={action} isOpen onOpenChange={vi.fn()} />);
  const input = screen.getByRole("textbox", { name: /Type the name to confirm/ });
  await userEvent.type(input, "Harbour");
  await userEvent.click(screen.getByRole("button", { name: "Delete the project" }));
  expect((await screen.findByRole("alert")).textContent).toContain("exactly as it is written");
  expect(input).toHaveProperty("value", "Harbour");
  expect(input.getAttribute("aria-invalid")).toBe("true");
});

test("keeping it closes the dialog", async () => {
  const onOpenChange = vi.fn();
  render(<DeleteDialog project={PROJECT} action={vi.fn()} isOpen onOpenChange={onOpenChange} />);
  await userEvent.click(screen.getByRole("button", { name: "Keep it" }));
  expect(onOpenChange).toHaveBeenCalledWith(false);
});
