import { expect, test } from "vitest";
import { parseLaunchOptions } from "./options";

test("without options the demo is made", () => {
  expect(parseLaunchOptions([])).toBe("launch");
});

test("the two options of the interface are understood", () => {
  expect(parseLaunchOptions(["--no-demo"])).toBe("launch-without-demo");
  expect(parseLaunchOptions(["--remove-demo"])).toBe("remove-demo");
});

test("an unknown option, or a second one, is named", () => {
  expect(() => parseLaunchOptions(["--demo"])).toThrow("Unknown option: --demo");
  expect(() => parseLaunchOptions(["--no-demo", "x"])).toThrow("Unknown option: --no-demo x");
  expect(() => parseLaunchOptions(["constructor"])).toThrow("Unknown option");
});
