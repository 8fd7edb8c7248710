import { describe, expect, it } from "vitest";
import { fallThrough, GRAVITY } from "../../../../src/core/flight/care/fall.ts";
import { createFallTable } from "../../../../src/core/flight/care/fall-table.ts";
import { energyMarks, FOOT_POUND, impactEnergy } from "../../../../src/core/flight/care/impact.ts";

describe("a fall", () => {
	it("without drag is the parabola: 6 m/s from 100 m carry 27 m", () => {
		const [fall] = fallThrough(6, 0, Number.POSITIVE_INFINITY, [100]);
		expect(fall.time).toBeCloseTo(Math.sqrt(200 / GRAVITY), 6);
		expect(fall.drift).toBeCloseTo(6 * Math.sqrt(200 / GRAVITY), 5);
		expect(fall.drift).toBeCloseTo(27.1, 1);
		expect(fall.down).toBeCloseTo(Math.sqrt(200 * GRAVITY), 5);
	});

	it("is longer by the climb: up at 3 m/s, the parabola goes up first", () => {
		const [fall] = fallThrough(0, 3, Number.POSITIVE_INFINITY, [40]);
		expect(fall.time).toBeCloseTo((3 + Math.sqrt(9 + 2 * GRAVITY * 40)) / GRAVITY, 6);
		// At no depth at all it is back where it left.
		const [back] = fallThrough(0, 3, Number.POSITIVE_INFINITY, [0]);
		expect(back.time).toBeCloseTo(6 / GRAVITY, 6);
	});

	it.each([1, 6, 18, 40])("straight down comes to u·tanh(gt/u) after u²/g·ln cosh(gt/u), u = %i m/s", (u) => {
		// Quadratic drag from rest: Timmerman & van der Weele, American Journal of Physics 67 (1999) 538.
		for (const depth of [1, 20, 100, 400]) {
			const [fall] = fallThrough(0, 0, u, [depth]);
			expect(fall.down).toBeCloseTo(u * Math.tanh((GRAVITY * fall.time) / u), 5);
			// ln cosh x = x − ln 2 + ln(1 + e^−2x), which large x don't overflow.
			const x = (GRAVITY * fall.time) / u;
			expect((u ** 2 / GRAVITY) * (x - Math.LN2 + Math.log1p(Math.exp(-2 * x)))).toBeCloseTo(depth, 4);
			expect(fall.drift).toBe(0);
		}
	});

	it("of a drone that held its place in 8 m/s of wind at 100 m drifts 40 to 65 m over the ground", () => {
		for (const u of [12, 14, 16]) {
			// Through the air it starts at 8 m/s against the wind and is carried with it.
			const [fall] = fallThrough(8, 0, u, [100]);
			const drift = 8 * fall.time - fall.drift;
			expect(drift).toBeGreaterThan(40);
			expect(drift).toBeLessThan(65);
		}
	});

	it("is the same from the table as integrated, to a few hundredths of a second and a few tenths of a metre", () => {
		const table = createFallTable({
			terminalSpeed: 18,
			wind: 7,
			highest: 110,
			across: 8,
			climb: { least: -2, most: 3 },
		});
		const out = new Float64Array(4);
		for (const [height, climb, across] of [
			[100, 0, 8],
			[37.3, 2.1, 13.4],
			[3, -1.7, 0.2],
			[0.4, 0, 5],
		]) {
			const [fall] = fallThrough(across, climb, 18, [height]);
			table.lookUp(height, climb, across, out);
			expect(Math.abs(out[0] - fall.time)).toBeLessThan(0.02);
			expect(Math.abs(out[1] - fall.drift)).toBeLessThan(0.15);
			expect(Math.abs(out[2] - fall.down)).toBeLessThan(0.15);
			expect(Math.abs(out[3] - fall.across)).toBeLessThan(0.15);
		}
	});

	it("is at its worst with the wind from behind, where the drone flies with it", () => {
		const table = createFallTable({
			terminalSpeed: 18,
			wind: 7,
			highest: 110,
			across: 8,
			climb: { least: -2, most: 3 },
		});
		const out = new Float64Array(3);
		table.worst(80, 0, 6, out);
		// As fast as the wind and a little slower: through the air it drifts back by little.
		const [behind] = fallThrough(1, 0, 18, [80]);
		expect(out[1]).toBeGreaterThan(7 * behind.time - behind.drift - 0.3);
		expect(out[1]).toBeLessThan(7 * out[0] + 0.3);
		// Against the wind it falls longest.
		const [against] = fallThrough(13, 0, 18, [80]);
		expect(Math.abs(out[0] - against.time)).toBeLessThan(0.03);
	});
});

describe("impact energy", () => {
	it("has its marks at 14.91 J and 33.90 J", () => {
		// 1 ft·lbf = 1.355 818 J (NIST SP 811, appendix B.8).
		expect(FOOT_POUND).toBeCloseTo(1.355818, 6);
		expect(energyMarks(0.5, 18).map(({ energy }) => Number(energy.toFixed(2)))).toEqual([14.91, 33.9]);
	});

	it("names the height from which a fall passes a mark: the fall from there has just that energy", () => {
		for (const { energy, height } of energyMarks(0.5, 18)) {
			const [fall] = fallThrough(0, 0, 18, [height ?? 0]);
			expect(impactEnergy(0.5, fall.down)).toBeCloseTo(energy, 4);
		}
	});

	it("knows a drone so light that it never passes them", () => {
		expect(energyMarks(0.1, 15).map(({ height }) => height)).toEqual([null, null]);
	});
});
