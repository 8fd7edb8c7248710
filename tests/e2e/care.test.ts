import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { openStage, type Stage } from "./browser.ts";

/** An upright wall of 5 columns and 4 rows over the ground: all but its top row stand in the wake of others. */
const wall = {
	format: "starstave-show",
	version: 1,
	title: "Wall",
	fleet: { count: 20 },
	venue: { wind: 6 },
	opening: "wall",
	formations: [
		{
			id: "wall",
			name: "the wall",
			shape: {
				kind: "points",
				points: Array.from({ length: 20 }, (_, i) => [2 * (i % 5), 0, 3.1 * Math.floor(i / 5)]),
			},
			place: { position: [0, 50, 30] },
		},
	],
};

describe("Care", () => {
	let stage: Stage;
	beforeAll(async () => {
		stage = await openStage();
	});
	afterAll(() => stage.close());

	it("tells what is to be seen to, brings drones out of the wake by one button, and asks for an audience line", async () => {
		const { page, complaints } = await stage.open({ width: 1440, height: 900 });
		await page.getByLabel("Open a soundtrack or a show", { exact: true }).setInputFiles({
			name: "wall.starstave.json",
			mimeType: "application/json",
			buffer: Buffer.from(JSON.stringify(wall)),
		});
		await page.getByRole("button", { name: "See Care" }).click({ timeout: 60_000 });
		await page.getByRole("heading", { name: "2 of 5 matters need attention" }).waitFor();
		await page.getByText(/^In the wall, in the opening, 15 drones stand in the wake of others/).waitFor();
		await page.getByRole("button", { name: /^Apply: Tilt the wall by 10°/ }).click();
		await page.getByText("In no hold does a drone stand in the wake of another.").waitFor({ timeout: 60_000 });
		await page.getByRole("heading", { name: "1 of 5 matters needs attention" }).waitFor();

		await page.getByRole("button", { name: "Fleet & venue" }).last().click();
		await page.getByRole("button", { name: "Draw an audience line" }).click();
		await page.getByRole("button", { name: "Care", exact: true }).click();
		await page.getByText(/short of the audience line/).waitFor({ timeout: 60_000 });
		await page.getByRole("heading", { name: "Nothing here needs attention first" }).waitFor();
		await page.getByRole("button", { name: "See it on the ground" }).click();
		await page.keyboard.press("Control+z");
		await page.getByText(/no audience line/).waitFor({ timeout: 60_000 });
		await page.keyboard.press("Control+z");
		await page.getByText(/15 drones stand in the wake of others/).waitFor({ timeout: 60_000 });
		expect(complaints).toEqual([]);
	});
});
