import { describe, expect, it } from "vitest";
import { judgeFlightPaths } from "./judge-flight-paths.ts";
import { type ReadTable, readTable } from "./read-flight-paths.ts";

const limits = { horizontal: 6, climb: 3, descent: 2, acceleration: 3, jerk: 10, spacing: 1.5, downwash: 2 };

/** A fleet by a formula, sampled ten times a second. */
function fly(drones: number, seconds: number, place: (t: number, drone: number) => readonly number[]): ReadTable {
	const rows = seconds * 10 + 1;
	const times = Float64Array.from({ length: rows }, (_, row) => row / 10);
	const values = new Float64Array(rows * drones * 3);
	times.forEach((t, row) => {
		for (let drone = 0; drone < drones; drone++) values.set(place(t, drone), (row * drones + drone) * 3);
	});
	return { drones, times, values };
}

const text = (content: string): Uint8Array => new TextEncoder().encode(content);

describe("the oracle of flight paths can fail", () => {
	it("finds two drones that cross between two rows", () => {
		// They pass each other 0.3 m apart at 0.05 s, and are 1.6 m apart at both rows.
		const table = fly(2, 1, (t, drone) => (drone === 0 ? [-0.8 + 16 * t, 0, 50] : [0.8 - 16 * t, 0.3, 50]));
		const verdict = judgeFlightPaths(table, { ...limits, horizontal: 100, acceleration: 1e9, jerk: 1e9 });
		expect(verdict.gap).toBeCloseTo(0.3, 9);
		expect(verdict.gapAt?.seconds).toBeCloseTo(0.05, 9);
		expect(verdict.broken.some((sentence) => sentence.startsWith("gap"))).toBe(true);
	});

	it("measures height by downwash", () => {
		const stacked = fly(2, 1, (_, drone) => [0, 0, 50 + 2.9 * drone]);
		expect(judgeFlightPaths(stacked, limits).gap).toBeCloseTo(1.45, 9);
		const clear = fly(2, 1, (_, drone) => [0, 0, 50 + 3 * drone]);
		expect(judgeFlightPaths(clear, limits).broken).toEqual([]);
	});

	it("finds each limit that is broken, and only that", () => {
		const named = (table: ReadTable): string[] =>
			judgeFlightPaths(table, limits).broken.map((sentence) => sentence.split(" is ")[0]);
		const wide = { ...limits, acceleration: 1e9, jerk: 1e9 };
		const steady = (speed: readonly number[]): string[] =>
			judgeFlightPaths(
				fly(1, 2, (t) => [speed[0] * t, speed[1] * t, 50 + speed[2] * t]),
				wide,
			).broken.map((sentence) => sentence.split(" ").slice(0, 2).join(" "));
		expect(steady([4, 4.5, 0])).toContain("horizontal speed");
		expect(steady([0, 0, 3.1])).toContain("climb is");
		expect(steady([0, 0, -2.1])).toContain("descent is");
		// A swing of 3.2 m/s² at its ends, 2.3 m/s and 4.6 m/s³.
		expect(named(fly(1, 20, (t) => [1.6 * Math.cos(Math.SQRT2 * t), 0, 50]))).toContain("acceleration");
		expect(named(fly(1, 20, (t) => [0.1 * Math.cos(5 * t), 0, 50]))).toContain("jerk");
	});

	it("finds a drone that does not come home", () => {
		const verdict = judgeFlightPaths(
			fly(1, 2, (t) => [0.001 * t, 0, 0]),
			limits,
		);
		expect(verdict.broken[0]).toMatch(/ends 0\.002 m from where it began/);
	});

	it("lets only the pitch of the grid count below 1 m", () => {
		const verdict = judgeFlightPaths(
			fly(4, 1, (_, drone) => [0.6 * drone, 0, 0]),
			limits,
		);
		expect(verdict.broken).toEqual([]);
		expect(verdict.groundGap).toBeCloseTo(0.6, 9);
	});

	it("refuses tables with a row too few, a time off the grid, a wrong header or a cell of another form", () => {
		const header = "drone,seconds,right_m,away_m,up_m\n";
		const row = (drone: number, time: string, x = "1.000000"): string => `${drone},${time},${x},0.000000,0.000000\n`;
		const read = (content: string) => readTable({ "positions-0000.csv": text(content) }, "positions", 10);
		const good = header + row(1, "0.000000") + row(1, "0.100000") + row(2, "0.000000") + row(2, "0.100000");
		expect(read(good).drones).toBe(2);
		expect(() => read(header + row(1, "0.000000") + row(1, "0.100000") + row(2, "0.000000"))).toThrow(/unequal/);
		expect(() => read(header + row(1, "0.000000") + row(1, "0.200000"))).toThrow(/is followed by/);
		expect(() => read(header + row(1, "0.100000"))).toThrow(/its name says 0/);
		const odd = { "positions-launch-0000.csv": text(header + row(1, "-0.050000")) };
		expect(() => readTable(odd, "positions", 10)).toThrow(/no multiple/);
		expect(() => read(row(1, "0.000000"))).toThrow(/header/);
		expect(() => read(header + row(1, "0.000000", "1.0"))).toThrow(/another form/);
		expect(() => readTable({ "positions-0030.csv": text(good) }, "positions", 10)).toThrow(/multiple of 60/);
	});
});
