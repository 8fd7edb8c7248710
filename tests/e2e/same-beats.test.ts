import { readFileSync } from "node:fs";
import { join, resolve } from "node:path";
import type { Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { decodeAudio } from "../../src/core/decode/index.ts";
import { analyse } from "../../src/core/music/index.ts";
import { readShow } from "../../src/core/show/index.ts";
import { openStage, type Stage } from "./browser.ts";
import { saveByDownload, savedShow } from "./saved-show.ts";

const demos = resolve(import.meta.dirname, "../../demo-tracks");

/** Opens a soundtrack in a fresh page and gives the beats of the show that it saves. */
async function beatsOfPage(page: Page, name: string, bytes: Buffer): Promise<readonly number[]> {
	await page
		.getByLabel("Open a soundtrack or a show", { exact: true })
		.setInputFiles({ name, mimeType: "audio/any", buffer: bytes });
	await page.getByRole("button", { name: new RegExp(`^${name.replace(/\..*$/, "")}`) }).waitFor({ timeout: 60_000 });
	await page.waitForFunction(() => !document.querySelector(".job"), undefined, { timeout: 60_000 });
	return readShow(await savedShow(page)).grid.beats;
}

/** Runs in the page: the same file through the browser's own decoder, one channel as base64 of float32. */
async function decodeThere(base64: string): Promise<{ rate: number; samples: string }> {
	const bytes = Uint8Array.from(atob(base64), (letter) => letter.charCodeAt(0));
	const buffer = await new OfflineAudioContext(2, 1, 44100).decodeAudioData(bytes.buffer);
	const mono = buffer.getChannelData(0).slice();
	for (let channel = 1; channel < buffer.numberOfChannels; channel++) {
		const other = buffer.getChannelData(channel);
		for (let i = 0; i < mono.length; i++) mono[i] += other[i];
	}
	for (let i = 0; i < mono.length; i++) mono[i] /= buffer.numberOfChannels;
	const raw = new Uint8Array(mono.buffer);
	let text = "";
	for (let i = 0; i < raw.length; i += 32768) text += String.fromCharCode(...raw.subarray(i, i + 32768));
	return { rate: buffer.sampleRate, samples: btoa(text) };
}

describe("the same soundtrack", () => {
	let stage: Stage;
	beforeAll(async () => {
		stage = await openStage();
	});
	afterAll(() => stage.close());

	for (const name of ["sparks-in-the-wake.ogg", "the-keeper-comes-down-dancing.mp3"]) {
		it(`has the same beats in a browser's worker and in Node, and within 5 ms by the browser's decoder: ${name}`, async () => {
			const bytes = readFileSync(join(demos, name));
			const here = analyse(await decodeAudio(new Uint8Array(bytes), name));
			const { page } = await stage.open();
			await saveByDownload(page);
			const there = await beatsOfPage(page, name, bytes);
			expect(there.length).toBe(here.beats.length);
			// Engines may differ in the last bit of a sine; a thousandth of a millisecond is far above that.
			const apart = there.map((beat, k) => Math.abs(beat - here.beats[k]));
			expect(Math.max(...apart)).toBeLessThan(1e-6);

			const { rate, samples } = await page.evaluate(decodeThere, bytes.toString("base64"));
			const raw = Buffer.from(samples, "base64");
			const mono = new Float32Array(raw.buffer.slice(raw.byteOffset, raw.byteOffset + raw.byteLength));
			const other = analyse({ sampleRate: rate, channels: [mono] });
			expect(other.beats.length).toBe(here.beats.length);
			const off = [...other.beats].map((beat, k) => Math.abs(beat - here.beats[k]));
			expect(Math.max(...off)).toBeLessThan(0.005);
		});
	}
});
