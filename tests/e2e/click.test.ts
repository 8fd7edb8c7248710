import { createHash } from "node:crypto";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { applyEdit, createShow, setGrid, setSoundtrack, writeShow } from "../../src/core/show/index.ts";
import { openStage, type Stage } from "./browser.ts";
import { writeRamp } from "./ramp.ts";

/**
 * The click track against its beats, sample by sample, in the audio that leaves for the loudspeaker: the soundtrack is a
 * ramp, so the sample before a click's first says where in the music it is.
 */
const SECONDS = 200;
const RATE = 8000;
/** Beats that drift, so that no even clock could stand in for them; bars of three. */
const BEATS = Array.from({ length: 360 }, (_, i) => 0.4 + 0.5 * i + 0.08 * Math.sin(i / 7));

/** Runs in the page before the app: what is led to the loudspeaker is kept, sample after sample. */
function recordLoudspeaker(): void {
	const connect = AudioNode.prototype.connect as (this: AudioNode, ...rest: unknown[]) => unknown;
	const kept = window as unknown as { blocks: Float32Array[]; rate: number };
	kept.blocks = [];
	const recorders = new WeakMap<BaseAudioContext, ScriptProcessorNode>();
	AudioNode.prototype.connect = function (this: AudioNode, ...rest: unknown[]) {
		const context = this.context;
		if (rest[0] instanceof AudioDestinationNode && context instanceof AudioContext) {
			let recorder = recorders.get(context);
			if (!recorder) {
				recorder = context.createScriptProcessor(16384, 1, 1);
				recorder.onaudioprocess = (event) => kept.blocks.push(event.inputBuffer.getChannelData(0).slice());
				recorders.set(context, recorder);
				kept.rate = context.sampleRate;
				connect.call(recorder, context.destination);
			}
			connect.call(this, recorder);
		}
		return connect.apply(this, rest);
	} as typeof AudioNode.prototype.connect;
}

interface HeardClick {
	/** Seconds of the music. */
	readonly at: number;
	/** Changes of sign in its first 5 ms: 11 at 1100 Hz, 17.6 at 1760 Hz. */
	readonly turns: number;
}

/** Runs in the page: the clicks in what was recorded so far, which is then let go of. */
function findClicks(seconds: number): HeardClick[] {
	const kept = window as unknown as { blocks: Float32Array[]; rate: number };
	const samples = new Float32Array(kept.blocks.reduce((sum, block) => sum + block.length, 0));
	let at = 0;
	for (const block of kept.blocks) {
		samples.set(block, at);
		at += block.length;
	}
	kept.blocks = [];
	const clicks: HeardClick[] = [];
	const span = Math.round(0.005 * kept.rate);
	const over = Math.round(0.06 * kept.rate);
	for (let i = 1; i + over < samples.length; i++) {
		if (samples[i] - samples[i - 1] < 0.2) continue;
		const ramp = samples[i - 1];
		// Where a busy page lost a block, or the music stopped, there is no ramp before and after.
		if (ramp <= 0 || Math.abs(samples[i + over] - ramp) > 0.01) continue;
		let turns = 0;
		for (let k = i + 1; k < i + span; k++) if (samples[k] >= ramp !== samples[k - 1] >= ramp) turns++;
		clicks.push({ at: (ramp / 0.9) * seconds, turns });
		// The tone dies away within 40 ms.
		i += over;
	}
	return clicks;
}

describe("the click track", () => {
	let stage: Stage;
	beforeAll(async () => {
		stage = await openStage();
	});
	afterAll(() => stage.close());

	it("clicks within 1 ms of every beat, higher where a bar begins, at the start and minutes on", async () => {
		const { page } = await stage.open();
		await page.context().addInitScript(recordLoudspeaker);
		await page.reload();
		const ramp = writeRamp(SECONDS, RATE);
		const show = applyEdit(createShow(4, "Clicks"), (draft) => {
			setSoundtrack(draft, {
				file: "ramp.wav",
				sha256: createHash("sha256").update(ramp).digest("hex"),
				duration: SECONDS,
				sampleRate: RATE,
				channels: 1,
			});
			setGrid(draft, {
				beats: BEATS,
				bars: BEATS.flatMap((_, beat) => (beat % 3 === 0 ? [{ beat, beatsPerBar: 3 }] : [])),
				source: "edited",
			});
		}).show;
		const open = page.getByLabel("Open a soundtrack or a show", { exact: true });
		await open.setInputFiles({
			name: "clicks.starstave.json",
			mimeType: "application/json",
			buffer: Buffer.from(writeShow(show)),
		});
		await page.getByRole("button", { name: /^Clicks/ }).waitFor();
		await open.setInputFiles({ name: "ramp.wav", mimeType: "audio/wav", buffer: ramp });
		await page.waitForTimeout(1000);
		await page.waitForFunction(() => !document.querySelector(".job"), undefined, { timeout: 60_000 });
		await page.locator("body").click({ position: { x: 2, y: 2 } });
		await page.keyboard.press("k");
		const heard: HeardClick[] = [];
		for (const start of [0, 150]) {
			await page.keyboard.press("Home");
			// Two bars a second and a half each: to bar 101, 150 s on.
			if (start > 0) for (let k = 0; k < 100; k++) await page.keyboard.press("Shift+ArrowRight");
			await page.keyboard.press("Space");
			await page.waitForTimeout(9000);
			await page.keyboard.press("Space");
			await page.waitForTimeout(700);
			heard.push(...(await page.evaluate(findClicks, SECONDS)));
		}
		expect(heard.filter(({ at }) => at < 12).length).toBeGreaterThan(12);
		expect(heard.filter(({ at }) => at > 140).length).toBeGreaterThan(12);
		for (const { at, turns } of heard) {
			let beat = 0;
			BEATS.forEach((time, k) => {
				if (Math.abs(time - at) < Math.abs(BEATS[beat] - at)) beat = k;
			});
			expect(Math.abs(BEATS[beat] - at), `the click at ${at.toFixed(4)} s`).toBeLessThan(0.001);
			if (beat % 3 === 0) expect(turns).toBeGreaterThan(14);
			else expect(turns).toBeLessThan(14);
		}
	});
});
