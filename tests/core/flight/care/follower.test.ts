import { describe, expect, it } from "vitest";
import { delayMargin, Followers, farthestOff, type Loop, stepFor } from "../../../../src/core/flight/care/follower.ts";

const loop = (change: Partial<Loop> = {}): Loop => ({ omega: 5, damping: 0.8, integral: 0.5, delay: 0, ...change });

/** x over time of one follower whose path jumps to 1 m, or which is pushed. */
function respond(one: Loop, seconds: number, to: number, push = 0): { times: number[]; values: number[] } {
	const step = stepFor(one.omega);
	const followers = new Followers([one], new Float64Array(3), step);
	const path = Float64Array.of(to, 0, 0);
	const pushes = Float64Array.of(push, 0, 0);
	const times: number[] = [];
	const values: number[] = [];
	for (let k = 1; k * step <= seconds; k++) {
		followers.advance(path, pushes);
		times.push(k * step);
		values.push(followers.positions[0]);
	}
	return { times, values };
}

describe("a drone that follows its path", () => {
	it.each([0.3, 0.5, 0.7])("overshoots a step by exp(−πζ/√(1−ζ²)), ζ = %f", (damping) => {
		// Ogata, Modern Control Engineering, 5th ed. 2010, §5.3. With and without integral action: the set point is weighted.
		for (const integral of [0, 0.5]) {
			const { values } = respond(loop({ damping, integral }), 10, 1);
			const expected = Math.exp((-Math.PI * damping) / Math.sqrt(1 - damping ** 2));
			expect(Math.max(...values) - 1).toBeCloseTo(expected, 2);
		}
	});

	it.each([0.4, 0.6])("stays within 2 %% after about 4/(ζω), ζ = %f", (damping) => {
		// Ogata 2010, §5.3: the envelope exp(−ζωt)/√(1−ζ²) is the bound, 4/(ζω) its usual reading.
		const omega = 4;
		const { times, values } = respond(loop({ omega, damping, integral: 0 }), 12, 1);
		const last = values.findLastIndex((value) => Math.abs(value - 1) > 0.02);
		const settled = times[last];
		const envelope = -Math.log(0.02 * Math.sqrt(1 - damping ** 2)) / (damping * omega);
		expect(settled).toBeLessThanOrEqual(envelope + 0.02);
		expect(settled).toBeGreaterThan(0.6 * (4 / (damping * omega)));
	});

	it("lags a path of steady speed by 2ζ/ω seconds", () => {
		const one = loop({ integral: 0.5 });
		const step = stepFor(one.omega);
		const followers = new Followers([one], new Float64Array(3), step);
		const path = new Float64Array(3);
		for (let k = 0; k * step < 8; k++) {
			path[0] = 6 * k * step;
			followers.advance(path, null);
		}
		// The drone is one step on from the path that it was last shown.
		expect((path[0] + 6 * step - followers.positions[0]) / 6).toBeCloseTo((2 * one.damping) / one.omega, 2);
	});

	it("is off by push/ω² in the end without integral action, and by nothing with it (final-value theorem)", () => {
		const without = respond(loop({ integral: 0 }), 20, 0, 2).values.at(-1);
		expect(without).toBeCloseTo(2 / 25, 5);
		const withIt = respond(loop({ integral: 0.5 }), 40, 0, 2).values.at(-1);
		expect(withIt).toBeCloseTo(0, 5);
		const late = respond(loop({ integral: 0.5, delay: 0.06 }), 40, 0, 2).values.at(-1);
		expect(late).toBeCloseTo(0, 5);
	});

	it("is taken off its place the further, the longer the delay", () => {
		const off = [0, 0.05, 0.1].map((delay) => farthestOff(loop({ delay }), 1));
		expect(off[1]).toBeGreaterThan(off[0]);
		expect(off[2]).toBeGreaterThan(off[1]);
		// Without delay or integral action a step's peak is known: (1 + overshoot)·push/ω².
		const plain = farthestOff(loop({ integral: 0, damping: 0.5 }), 1);
		expect(plain).toBeCloseTo((1 + Math.exp((-Math.PI * 0.5) / Math.sqrt(0.75))) / 25, 3);
	});

	it("swings up by itself beyond the delay margin and dies down within it", () => {
		const margin = delayMargin(loop());
		const swing = (delay: number): number => Math.abs(respond(loop({ delay }), 60, 1).values.at(-1)! - 1);
		expect(swing(0.93 * margin)).toBeLessThan(0.2);
		expect(swing(1.07 * margin)).toBeGreaterThan(5);
	});

	it("stands still on a path that stands still, wherever it is", () => {
		const start = Float64Array.of(120, -40, 80);
		const followers = new Followers([loop({ delay: 0.05 })], start, 0.02);
		for (let k = 0; k < 500; k++) followers.advance(start, null);
		for (let axis = 0; axis < 3; axis++) expect(followers.positions[axis]).toBeCloseTo(start[axis], 9);
	});
});
