import { readFileSync } from "node:fs";
import { unzipSync } from "fflate";
import type { Locator, Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { judgeFlightPaths } from "../oracles/judge-flight-paths.ts";
import { readTable } from "../oracles/read-flight-paths.ts";
import { openStage, type Stage } from "./browser.ts";
import { makeTrack } from "./make-track.ts";

/** The job as a user does it, in a real browser, on music that isn't the demo. */
describe("cutting a routine to a client's soundtrack", () => {
	let stage: Stage;
	beforeAll(async () => {
		stage = await openStage();
	});
	afterAll(() => stage.close());

	it("goes from the soundtrack over the rough cut and a drag that turns too fast to files that are right", async () => {
		const { page, complaints } = await stage.open();
		const track = makeTrack(112, 32, 7);
		await openTrack(page, "evening.wav", track.wav);
		expect(await page.getByText(/About 112 beats a minute/).count()).toBe(1);

		await page.getByRole("button", { name: "Make a rough cut …" }).first().click();
		const drones = page.getByRole("dialog").getByLabel("drones");
		await drones.fill("40");
		await drones.press("Enter");
		await page
			.getByRole("button", { name: "Make the rough cut" })
			.click()
			.catch(() => {});
		await page.getByText(/^(\d+) of \1 fly$/).waitFor({ timeout: 60_000 });
		await quiet(page);

		// Play: the clock runs with the music.
		await page.getByRole("button", { name: "Play" }).click();
		await page.waitForTimeout(1200);
		await page.getByRole("button", { name: "Pause" }).click();
		expect(await secondsShown(page)).toBeGreaterThan(0.5);

		// To the first transition by the keyboard; its departure stands under the playhead.
		await page.getByRole("button", { name: "To the start (Home)" }).click();
		const heading = page.getByRole("heading", { name: /^Cue \d+ · to / });
		for (let i = 0; i < 12 && (await heading.count()) === 0; i++) {
			await page.keyboard.press("ArrowDown");
			// The margin is drawn in a later frame: looked at too early, one press too many is made.
			await page.waitForTimeout(250);
		}
		expect(await heading.count()).toBe(1);
		const departs = await page.getByLabel("departs").inputValue();
		const head = await atRest(page.locator(".stave-playhead"));
		const row = (await page.locator(".stave-body", { has: page.locator(".stave-playhead") }).boundingBox())!;
		const hand = { x: head.x + 1, y: row.y + 90 };

		// Drag the departure later until the transition is too fast, and back.
		await page.mouse.move(hand.x, hand.y);
		await page.mouse.down();
		const short = page.locator(".note").getByText(/beats? short/);
		let pulled = 0;
		while (pulled < 400 && (await short.count()) === 0) {
			pulled += 12;
			await page.mouse.move(hand.x + pulled, hand.y, { steps: 2 });
			await page.waitForTimeout(40);
		}
		await page.waitForTimeout(250);
		expect(pulled).toBeLessThan(400);
		expect(await short.count()).toBe(1);
		await page.mouse.move(hand.x, hand.y, { steps: 4 });
		await short.waitFor({ state: "detached" });
		await expect.poll(() => page.getByLabel("departs").inputValue()).toBe(departs);
		// Out again and let go: the verdict stands, and undo takes the whole drag back.
		await page.mouse.move(hand.x + pulled, hand.y, { steps: 4 });
		await page.mouse.up();
		await page.getByText("1 does not").waitFor();
		await expect.poll(() => page.getByLabel("departs").inputValue()).not.toBe(departs);
		await page.keyboard.press("Control+z");
		await short.waitFor({ state: "detached" });
		await expect.poll(() => page.getByLabel("departs").inputValue()).toBe(departs);
		await quiet(page);

		// Hand-off: the files are right.
		await page.getByRole("button", { name: "Hand-off" }).click();
		const [download] = await Promise.all([
			page.waitForEvent("download", { timeout: 90_000 }),
			page.getByRole("button", { name: "Make the hand-off" }).click({ timeout: 30_000 }),
		]);
		const files = unzipSync(new Uint8Array(readFileSync(await download.path())));
		const names = Object.keys(files);
		for (const wanted of ["cue-list.csv", "cue-list.json", "flight-paths.zip", "report.html", "manifest.json"]) {
			expect(
				names.some((name) => name.endsWith(wanted)),
				`${wanted} among ${names.join(", ")}`,
			).toBe(true);
		}
		const paths = unzipSync(files[names.find((name) => name.endsWith("flight-paths.zip"))!]);
		const table = readTable(paths, "positions", 10);
		const verdict = judgeFlightPaths(table, DEFAULT_LIMITS);
		expect(verdict.broken).toEqual([]);
		expect(verdict.drones).toBe(40);
		expect(verdict.home).toBeLessThan(1e-5);
		expect(complaints).toEqual([]);
	});

	it("keeps the show after a reload, and opens it read-only in a second tab", async () => {
		const opened = await stage.open();
		const { page } = opened;
		await openTrack(page, "kept.wav", makeTrack(120, 8, 3).wav);
		await page.getByLabel("title").fill("Kept over night");
		await page.getByLabel("title").press("Enter");
		await page.getByRole("button", { name: /Kept over night: menu/ }).waitFor();
		await page.waitForTimeout(800);
		const second = await opened.beside();
		await second.page.getByRole("button", { name: /Kept over night: menu/ }).waitFor();
		await second.page.getByText(/another tab/).waitFor();
		expect(await second.page.getByLabel("title").isDisabled()).toBe(true);
		await second.page.close();
		await page.reload();
		await page.getByRole("button", { name: /Kept over night: menu/ }).waitFor();
		expect(await page.getByLabel("title").isDisabled()).toBe(false);
	});

	it("says in a sentence what is wrong with a file, and keeps what was open", async () => {
		const { page } = await stage.open();
		await openTrack(page, "stays.wav", makeTrack(120, 8, 3).wav);
		const input = page.getByLabel("Open a soundtrack or a show", { exact: true });
		const bad: [string, Buffer, RegExp][] = [
			["letter.wav", Buffer.from("Dear client, here is the music"), /letter\.wav is not audio/],
			["empty.mp3", Buffer.alloc(0), /empty\.mp3 is empty/],
			[
				"later.starstave.json",
				Buffer.from('{"format":"starstave-show","version":2,"fleet":{"count":5}}'),
				/newer program.*version is 2/,
			],
			["nan.starstave.json", Buffer.from('{"format":"starstave-show","version":1,"fleet":{"count":NaN}}'), /NaN/],
			["twice.starstave.json", Buffer.from(twice), /has the id ring that formation 1 has/],
		];
		for (const [name, buffer, sentence] of bad) {
			await input.setInputFiles({ name, mimeType: "application/octet-stream", buffer });
			const notice = page.getByRole("alert");
			await notice.waitFor();
			expect(await notice.textContent()).toMatch(sentence);
			await notice.getByRole("button", { name: "Put away" }).click();
			expect(await page.getByRole("button", { name: /stays: menu/ }).count()).toBe(1);
		}
	});
});

const ring = { id: "ring", shape: { kind: "ring", count: 5, radius: 9 } };
const twice = JSON.stringify({ format: "starstave-show", version: 1, fleet: { count: 5 }, formations: [ring, ring] });

const DEFAULT_LIMITS = { horizontal: 6, climb: 3, descent: 2, acceleration: 3, jerk: 10, spacing: 1.5, downwash: 2 };

async function openTrack(page: Page, name: string, wav: Uint8Array): Promise<void> {
	const input = page.getByLabel("Open a soundtrack or a show", { exact: true });
	await input.setInputFiles({ name, mimeType: "audio/wav", buffer: Buffer.from(wav) });
	await page.getByRole("button", { name: `${name.replace(/\..*$/, "")}: menu` }).waitFor();
	await quiet(page);
}

/** Where something stands once two looks a few frames apart agree. */
async function atRest(locator: Locator): Promise<{ x: number; y: number }> {
	let last = { x: Number.NaN, y: Number.NaN };
	for (let look = 0; look < 40; look++) {
		const box = await locator.boundingBox();
		if (box !== null && box.x === last.x && box.y === last.y) return box;
		if (box !== null) last = box;
		await locator.page().waitForTimeout(250);
	}
	throw new Error("It never came to rest.");
}

/** Nothing is under way any more. */
async function quiet(page: Page): Promise<void> {
	await page.waitForTimeout(300);
	await page.waitForFunction(() => !document.querySelector(".job"), undefined, { timeout: 90_000 });
}

async function secondsShown(page: Page): Promise<number> {
	const text = await page.locator(".place span").textContent();
	const [minutes, seconds] = (text ?? "0:0").split(":");
	return Number(minutes) * 60 + Number(seconds);
}
