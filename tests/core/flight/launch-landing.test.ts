import { describe, expect, it } from "vitest";
import { airtimeOf } from "../../../src/core/flight/care/airtime.ts";
import { careFor, dronePositions, flyShow, sayCare } from "../../../src/core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../../../src/core/formation/index.ts";
import { readShow } from "../../../src/core/show/index.ts";

const PITCH = 0.75;

/** 36 drones on a grid of half the spacing, to a flat formation and back. */
const show = readShow(
	JSON.stringify({
		format: "starstave-show",
		version: 1,
		title: "dense grid",
		fleet: { count: 36, wake: { radius: 0.8, reach: 8 } },
		venue: { volume: { min: [-60, 0, 0], max: [60, 80, 100] } },
		takeoff: {
			shape: { kind: "grid", columns: 6, rows: 6, pitch: PITCH },
			place: { position: [0, 40, 0] },
			waves: 4,
			interval: 3,
		},
		opening: "flat",
		formations: [
			{ id: "flat", shape: { kind: "grid", columns: 6, rows: 6, pitch: 3 }, place: { position: [0, 40, 40] } },
		],
	}),
);
const slots = fleetSlotsOf(show);
const { flight, check } = flyShow(show, slots, takeoffSlots(show));
const positions = new Float64Array(3 * flight.drones);

/** Smallest distance, by brute force, of two drones that are both in the air, in the measure of spacing. */
function gapInAir(time: number): number {
	dronePositions(flight, time, positions);
	let least = Number.POSITIVE_INFINITY;
	for (let i = 0; i < positions.length; i += 3) {
		if (positions[i + 2] <= 1) continue;
		for (let j = 0; j < i; j += 3) {
			if (positions[j + 2] <= 1) continue;
			const up = (positions[i + 2] - positions[j + 2]) / show.fleet.limits.downwash;
			least = Math.min(least, Math.hypot(positions[i] - positions[j], positions[i + 1] - positions[j + 1], up));
		}
	}
	return least;
}

describe("launch and landing on a grid denser than the spacing", () => {
	it("go in waves that keep the spacing in the air, looked at 20 times a second", () => {
		expect(check.flies).toBe(true);
		let least = Number.POSITIVE_INFINITY;
		for (let time = flight.begins; time < flight.ends; time += 0.05) least = Math.min(least, gapInAir(time));
		expect(least).toBeGreaterThanOrEqual(show.fleet.limits.spacing - 0.002);
		// On the ground they do stand nearer, so it is the waves that part them.
		dronePositions(flight, flight.begins, positions);
		expect(Math.hypot(positions[3] - positions[0], positions[4] - positions[1])).toBeCloseTo(PITCH, 6);
	});

	it("send neighbours up in different waves", () => {
		const [climb] = flight.legs;
		const delays = climb.delays!;
		for (let i = 0; i < 36; i++) {
			const right = i % 6 < 5 ? i + 1 : null;
			if (right !== null) expect(delays[i]).not.toBe(delays[right]);
			if (i + 6 < 36) expect(delays[i]).not.toBe(delays[i + 6]);
		}
		expect(new Set(delays).size).toBeGreaterThanOrEqual(4);
	});

	it("come down the last metres at no more than 0.5 m/s, and no faster than 1.5 m/s over the grid", () => {
		const last = flight.legs.at(-1)!;
		const later = new Float64Array(positions.length);
		const step = 0.02;
		for (let time = last.departs; time < last.arrives - step; time += step) {
			dronePositions(flight, time, positions);
			dronePositions(flight, time + step, later);
			for (let k = 2; k < positions.length; k += 3) {
				const speed = (positions[k] - later[k]) / step;
				expect(speed).toBeLessThanOrEqual((positions[k] <= 4 ? 0.5 : 1.5) + 1e-6);
			}
		}
	});

	it("are told to wait in each other's wake where the layers over the grid stand close, and for how long", () => {
		const holds = careFor(show, slots, flight).wakeHolds.filter(({ where }) => where !== "show");
		expect(holds.map(({ where }) => where)).toEqual(["launch", "landing"]);
		const { delays, departs, arrives, plan } = flight.legs[0];
		dronePositions(flight, arrives - 1e-6, positions);
		// By brute force: the upper goes first, so the lower stands under it from when it is up itself.
		let longest = 0;
		const under = new Set<number>();
		for (let i = 0; i < 36; i++) {
			for (let j = 0; j < 36; j++) {
				const rise = positions[3 * j + 2] - positions[3 * i + 2];
				const aside = Math.hypot(positions[3 * j] - positions[3 * i], positions[3 * j + 1] - positions[3 * i + 1]);
				if (rise < 0.1 || rise > 8 || aside > 0.8) continue;
				const from = departs + plan.shortest + Math.max(delays![i], delays![j]);
				if (arrives - from < 1e-6) continue;
				under.add(i);
				longest = Math.max(longest, arrives - from);
			}
		}
		expect(under.size).toBeGreaterThan(0);
		expect(holds[0].drones).toBe(under.size);
		expect(holds[0].to - holds[0].from).toBeCloseTo(longest, 6);
		const topic = sayCare(show, careFor(show, slots, flight)).find(({ id }) => id === "wake");
		expect(topic?.sentences.join(" ")).toContain("Over the take-off grid, while the waves of landing wait,");
	});

	it("count each drone's motor time from its own wave: the first up wait longest", () => {
		const airtime = airtimeOf(show, flight)!;
		const delays = flight.legs[0].delays!;
		const first = delays.indexOf(Math.min(...delays));
		expect(airtime.seconds[first]).toBe(airtime.longest.seconds);
		// By brute force: from its turn until it stands on the ground for good.
		for (const drone of [0, 7, 35]) {
			const starts = flight.begins + delays[drone];
			let stands = flight.ends;
			for (let time = flight.ends - 0.01; time > starts; time -= 0.01) {
				dronePositions(flight, time, positions);
				if (positions[3 * drone + 2] > 1e-4) break;
				stands = time;
			}
			expect(airtime.seconds[drone]).toBeGreaterThanOrEqual(stands - starts - 0.02);
			expect(airtime.seconds[drone]).toBeLessThan(stands - starts + 0.5);
		}
	});
});
