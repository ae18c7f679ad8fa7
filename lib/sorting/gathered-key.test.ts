import { expect, test } from "vitest";
import { doubtsOf, gatheredKey, isGathered } from "@/lib/sorting/gathered-key";

test("a gathered question has one key whatever the order, and answers each of its doubts and no other", () => {
  const key = gatheredKey("hole", ["hole b", "hole a", "hole c", "hole d"]);
  expect(key).toBe(gatheredKey("hole", ["hole d", "hole c", "hole b", "hole a"]));
  expect(key).not.toBe(gatheredKey("hole", ["hole d", "hole c", "hole b", "hole e"]));
  expect(doubtsOf(key)).toEqual(["hole a", "hole b", "hole c", "hole d"]);
});

test("a single question answers itself", () => {
  expect([isGathered("hole several"), doubtsOf("hole a")]).toEqual([false, ["hole a"]]);
});
