import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { openStage, type Stage } from "./browser.ts";
import { writeRamp } from "./ramp.ts";

/**
 * Sound and screen in step, measured on the audio itself: the soundtrack is a ramp, so that each sample says where in
 * the music it is; an analyser hangs on what the app sends to the loudspeaker, and its value is held against the time
 * that the masthead shows in the same frame (the night view is drawn from the same instant).
 */
const SECONDS = 60;

/** Runs in the page before the app: whatever is led to the loudspeaker is led to an analyser too. */
function tapLoudspeaker(): void {
	const connect = AudioNode.prototype.connect as (this: AudioNode, ...rest: unknown[]) => unknown;
	const taps = new WeakMap<BaseAudioContext, AnalyserNode>();
	AudioNode.prototype.connect = function (this: AudioNode, ...rest: unknown[]) {
		const target = rest[0];
		const context = this.context;
		if (target instanceof AudioDestinationNode && context instanceof AudioContext) {
			let tap = taps.get(context);
			if (!tap) {
				tap = new AnalyserNode(context, { fftSize: 2048 });
				taps.set(context, tap);
				(window as unknown as { tap: AnalyserNode }).tap = tap;
			}
			connect.call(this, tap);
		}
		return connect.apply(this, rest);
	} as typeof AudioNode.prototype.connect;
}

/** Runs in the page: seconds that the masthead shows less seconds that are heard, over so many frames. */
async function measureFrames(frames: number): Promise<number[]> {
	const tap = (window as unknown as { tap: AnalyserNode }).tap;
	const clock = document.querySelector(".place span");
	const context = tap.context as AudioContext;
	const samples = new Float32Array(tap.fftSize);
	const errors: number[] = [];
	for (let frame = 0; frame < frames; frame++) {
		const time = await new Promise<number>((done) => requestAnimationFrame(done));
		// After all of this frame's callbacks, so that the masthead has been written.
		await new Promise((done) => setTimeout(done, 0));
		const stamp = context.getOutputTimestamp();
		tap.getFloatTimeDomainData(samples);
		const rendered = (samples[samples.length - 1] / 0.9) * 60;
		const ahead = context.currentTime - (stamp.contextTime ?? 0);
		const heard = rendered - ahead + (time - (stamp.performanceTime ?? 0)) / 1000;
		const match = /^(−?)(\d+):([\d.]+)$/.exec(clock?.textContent ?? "");
		if (match && samples[samples.length - 1] > 0) errors.push(Number(match[2]) * 60 + Number(match[3]) - heard);
	}
	return errors;
}

describe("sound and screen", () => {
	let stage: Stage;
	beforeAll(async () => {
		stage = await openStage();
	});
	afterAll(() => stage.close());

	it("are in step within 10 ms while playing and after 20 seeks", async () => {
		const { page } = await stage.open();
		await page.context().addInitScript(tapLoudspeaker);
		await page.reload();
		await page
			.getByLabel("Open a soundtrack or a show", { exact: true })
			.setInputFiles({ name: "ramp.wav", mimeType: "audio/wav", buffer: writeRamp(SECONDS, 48000) });
		await page.getByText("ramp", { exact: false }).first().waitFor();
		const play = page.getByRole("button", { name: "Play" });
		await page.waitForFunction(() => !document.querySelector(".job"), undefined, { timeout: 60_000 });
		await play.click();
		await page.waitForFunction(() => "tap" in window, undefined, { timeout: 10_000 });
		await page.waitForTimeout(600);
		const median = (values: number[]) => [...values].sort((a, b) => a - b)[values.length >> 1];
		const steady = await page.evaluate(measureFrames, 60);
		expect(steady.length).toBeGreaterThan(30);
		expect(Math.abs(median(steady))).toBeLessThan(0.01);
		const staves = page.getByLabel("Staves: the music with its cues");
		const box = (await staves.locator(".stave-body").first().boundingBox())!;
		for (let seek = 0; seek < 20; seek++) {
			await page.mouse.click(box.x + 20 + ((seek * 37) % 200), box.y + 40);
			await page.waitForTimeout(150);
			const errors = await page.evaluate(measureFrames, 12);
			expect(errors.length).toBeGreaterThan(4);
			expect(Math.abs(median(errors)), `after seek ${seek + 1}`).toBeLessThan(0.01);
		}
	});
});
