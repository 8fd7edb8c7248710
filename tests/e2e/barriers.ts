import { createRequire } from "node:module";
import type { Page } from "playwright-core";

/** Put into a page as an init script, past the content security policy as a debugger goes past it. */
export const axePath = createRequire(import.meta.url).resolve("axe-core/axe.min.js");

/** What axe-core finds of WCAG 2.2 A and AA, as "rule: selector". */
export async function findBarriers(page: Page): Promise<string[]> {
	return page.evaluate(async () => {
		const axe = (window as unknown as { axe: { run(root: Document, options: object): Promise<AxeAnswer> } }).axe;
		interface AxeAnswer {
			violations: { id: string; nodes: { target: string[] }[] }[];
		}
		const answer = await axe.run(document, { runOnly: ["wcag2a", "wcag2aa", "wcag21a", "wcag21aa", "wcag22aa"] });
		return answer.violations.flatMap((one) => one.nodes.map((node) => `${one.id}: ${node.target.join(" ")}`));
	});
}
