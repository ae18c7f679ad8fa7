// @vitest-environment jsdom
import { cleanup, render, screen } from "@testing-library/react";
import { afterEach, expect, test } from "vitest";
import { Field } from "@/components/ui/field";

afterEach(cleanup);

function describedBy(input: HTMLElement): string[] {
  const ids = input.getAttribute("aria-describedby")?.split(" ") ?? [];
  return ids.map((id) => document.getElementById(id)?.textContent ?? "");
}

test("an input carries its label and its hint", () => {
  render(<Field name="name" label="Name" hint="As the others see it." />);
  const input = screen.getByRole("textbox", { name: "Name" });
  expect(describedBy(input)).toEqual(["As the others see it."]);
  expect(input.getAttribute("aria-invalid")).toBeNull();
});

test("what is wrong is tied to the input, before the hint", () => {
  render(<Field name="name" label="Name" hint="As the others see it." error="Give a name." />);
  const input = screen.getByRole("textbox", { name: "Name" });
  expect(describedBy(input)).toEqual(["Give a name.", "As the others see it."]);
  expect(input.getAttribute("aria-invalid")).toBe("true");
});
