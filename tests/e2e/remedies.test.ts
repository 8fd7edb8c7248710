import type { Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { writeShow } from "../../src/core/show/index.ts";
import { smallShow } from "../core/flight/remedy/small-show.ts";
import { axePath, findBarriers } from "./barriers.ts";
import { openStage, type Stage } from "./browser.ts";

const ring = (id: string, x: number, radius = 8) => ({
	id,
	name: id,
	shape: { kind: "ring", count: 12, radius },
	place: { position: [x, 40, 40] },
});
const show = smallShow(
	12,
	[ring("near", -20), ring("far", 20), ring("back", -20, 9), ring("heap", 20, 2)],
	[
		{ at: 60, length: 15, formation: "far" },
		{ at: 100, length: 40, formation: "back" },
	],
);

async function openShow(page: Page): Promise<void> {
	await page.getByLabel("Open a soundtrack or a show", { exact: true }).setInputFiles({
		name: "small.starstave.json",
		mimeType: "application/json",
		buffer: Buffer.from(writeShow(show)),
	});
	await page.getByText("1 does not").waitFor({ timeout: 60_000 });
}

/** All remedies are there. */
const found = (page: Page) => page.getByText("Each has been planned and proven.").waitFor({ timeout: 60_000 });

describe("verdicts and remedies", () => {
	let stage: Stage;
	beforeAll(async () => {
		stage = await openStage();
	});
	afterAll(() => stage.close());

	it("open the worst by keyboard, apply a remedy by one press, and take it back by one undo", async () => {
		const { page, complaints } = await stage.open();
		await page.context().addInitScript({ path: axePath });
		await page.reload();
		await page.getByRole("main").waitFor();
		await openShow(page);
		await page.keyboard.press("Shift+Digit2");
		const rows = page.locator(".verdict-row");
		await expect.poll(() => rows.count()).toBe(4);
		// Worst first, and it opens where it is tightest: in its own time.
		expect(await rows.first().textContent()).toContain("Cue 1 · to far");
		await rows.first().focus();
		await page.keyboard.press("Enter");
		expect(await rows.first().getAttribute("aria-expanded")).toBe("true");
		await found(page);
		expect(await page.getByRole("img", { name: /^Level speed over the time of the flight: at most/ }).count()).toBe(1);
		expect(await page.locator(".plot").count()).toBe(5);
		const clock = await page.locator(".place span").textContent();
		expect(clock).toMatch(/^0:3[0-7]\./);
		expect(await findBarriers(page)).toEqual([]);

		const remedy = page.getByRole("button", { name: /^Apply: Bring far [\d.]+ m nearer to near\./ });
		await remedy.focus();
		await page.keyboard.press("Enter");
		await page.getByText("2 of 2 fly").waitFor({ timeout: 60_000 });
		// The keys stay with the leg.
		expect(await page.evaluate(() => document.activeElement?.textContent)).toContain("Cue 1 · to far");
		expect(await page.getByText("What would make it fly").count()).toBe(0);
		await page.locator("body").click({ position: { x: 2, y: 2 } });
		await page.keyboard.press("Control+z");
		await page.getByText("1 does not").waitFor({ timeout: 60_000 });
		expect(complaints).toEqual([]);
	});

	it("mend a formation in which the fleet can't stand", async () => {
		const { page, complaints } = await stage.open({ width: 1440, height: 900 });
		await openShow(page);
		await page.keyboard.press("Shift+Digit2");
		await page.getByRole("button", { name: "What would mend it: heap" }).click();
		await page.getByText(/The fleet can't stand here: its closest slots are/).waitFor();
		await found(page);
		await page.getByRole("button", { name: /^Apply: Enlarge heap to/ }).click();
		await page.getByText("The fleet can't stand here").waitFor({ state: "detached", timeout: 60_000 });
		await page.locator("body").click({ position: { x: 2, y: 2 } });
		await page.keyboard.press("Control+z");
		await page.getByText("The fleet can't stand here").waitFor({ timeout: 60_000 });
		expect(complaints).toEqual([]);
	});

	it("say how large a drawing came in", async () => {
		const { page } = await stage.open();
		await openShow(page);
		await page.keyboard.press("Shift+Digit3");
		const moon =
			'<svg xmlns="http://www.w3.org/2000/svg"><circle cx="5" cy="5" r="4" stroke="#fff" fill="none"/></svg>';
		await page
			.getByLabel("Drawing as SVG, or points as CSV")
			.setInputFiles({ name: "moon.svg", mimeType: "image/svg+xml", buffer: Buffer.from(moon) });
		await page.getByText(/^moon is [\d.]+ m wide, .*sized so that its slots stand 1\.80 m apart or more/).waitFor();
	});
});
