import AxeBuilder from "@axe-core/playwright";
import type { Page } from "@playwright/test";

/** WCAG 2.2 AA and below (W3C), as far as a program can tell, by axe-core. */
const STANDARDS = ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa", "best-practice"];

/** What axe-core finds serious or critical on the page as it stands, one line each. */
export async function findSerious(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).withTags(STANDARDS).analyze();
  return violations
    .filter(({ impact }) => impact === "serious" || impact === "critical")
    .map(({ id, nodes }) => `${id}: ${nodes.map(({ target }) => target.join(" ")).join(", ")}`);
}
