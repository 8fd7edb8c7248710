import { describe, expect, it } from "vitest";
import { fallThrough } from "../../../../src/core/flight/care/fall.ts";
import { findFallZone } from "../../../../src/core/flight/care/fall-zone.ts";
import { flightOf, showWith, steadyLeg } from "./one-leg.ts";

/** One drone that hangs at 100 m in the middle of a venue of 200 m × 120 m. */
const hanging = flightOf([steadyLeg("t", 0, 10, [0, 60, 100], [0, 60, 100])]);
const audience = { from: [-50, -20] as [number, number], to: [50, -20] as [number, number] };

describe("the fall zone", () => {
	it("of a drone that hangs in the wind is a circle of its drift and position error", () => {
		const show = showWith(1, { positionError: 0.5, terminalSpeed: 14 }, { wind: 8, audience, buffer: 10 });
		const zone = findFallZone(show, hanging);
		const [fall] = fallThrough(8, 0, 14, [100]);
		const drift = 8 * fall.time - fall.drift + 0.5;
		expect(drift).toBeGreaterThan(40);
		expect(drift).toBeLessThan(65);
		expect(zone?.farthest.distance).toBeCloseTo(drift, 1);
		for (const [x, y] of zone?.outline ?? []) {
			const from = Math.hypot(x, y - 60);
			// The outline goes round the circle by the lines that touch it.
			expect(from).toBeGreaterThan(drift - 0.1);
			expect(from).toBeLessThan(drift / Math.cos(Math.PI / 48) + 0.1);
		}
		expect(zone?.audience?.distance).toBeCloseTo(80 - drift, 1);
		expect(zone?.border.distance).toBeCloseTo(70 - drift, 1);
	});

	it("without wind is where the drone's own speed carries it: 27 m at 6 m/s from 100 m, nearly without drag", () => {
		const flying = flightOf([steadyLeg("t", 0, 10, [-30, 60, 100], [30, 60, 100])]);
		const zone = findFallZone(showWith(1, { positionError: 0, terminalSpeed: 199 }, { wind: 0 }), flying);
		expect(zone?.farthest.distance).toBeGreaterThan(26.8);
		expect(zone?.farthest.distance).toBeLessThan(27.1);
		// It has its speed until the last instant before it is there.
		const right = Math.max(...(zone?.outline ?? []).map(([x]) => x));
		expect(right).toBeGreaterThan(54);
		expect(right).toBeLessThan(57.1);
		const left = Math.min(...(zone?.outline ?? []).map(([x]) => x));
		expect(left).toBeGreaterThanOrEqual(-30.1);
	});

	it("is lengthened by a climb and shortened by a descent", () => {
		const show = showWith(1, { positionError: 0 }, { wind: 8 });
		const reach = [60, 0, -40].map(
			(up) => findFallZone(show, flightOf([steadyLeg("t", 0, 20, [0, 60, 50], [0, 60, 50 + up])]))?.longest ?? 0,
		);
		expect(reach[0]).toBeGreaterThan(reach[1]);
		expect(reach[1]).toBeGreaterThanOrEqual(reach[2]);
	});

	it("that passes the audience line or the border says by how much, by whom and when", () => {
		const show = showWith(
			2,
			{ positionError: 0, terminalSpeed: 14 },
			{ wind: 8, audience: { from: [-50, 20], to: [50, 20] }, volume: { min: [-20, 0, 0], max: [100, 120, 120] } },
		);
		const two = flightOf([steadyLeg("t", 5, 10, [0, 60, 100, 40, 60, 20], [0, 60, 100, 40, 60, 20])]);
		const zone = findFallZone(show, two);
		const [fall] = fallThrough(8, 0, 14, [100]);
		const drift = 8 * fall.time - fall.drift;
		expect(zone?.audience?.distance).toBeCloseTo(40 - drift, 1);
		expect(zone?.audience?.drone).toBe(0);
		expect(zone?.audience?.time).toBe(5);
		expect(zone?.border.side).toBe("left");
		expect(zone?.border.distance).toBeCloseTo(30 - drift, 1);
	});

	it("has no audience line to keep from where the venue has none, and nothing to say where nothing flies", () => {
		expect(findFallZone(showWith(1, {}), hanging)?.audience).toBeNull();
		const grounded = flightOf([steadyLeg("t", 0, 10, [0, 0, 0], [0, 0, 0])]);
		expect(findFallZone(showWith(1, {}), grounded)).toBeNull();
	});

	it("misses no drone that brute force finds", () => {
		// 12 drones on straight flights of all directions and heights, each looked at on its own.
		const from: number[] = [];
		const to: number[] = [];
		for (let i = 0; i < 12; i++) {
			from.push(10 * i - 60, 30 + ((i * 7) % 50), 20 + ((i * 31) % 80));
			to.push(40 - 9 * i, 60 - ((i * 13) % 40), 30 + ((i * 17) % 70));
		}
		const show = showWith(12, { positionError: 0 }, { wind: 6, audience });
		const whole = findFallZone(show, flightOf([steadyLeg("t", 0, 12, from, to)]));
		const alone = Array.from({ length: 12 }, (_, i) =>
			findFallZone(
				showWith(1, { positionError: 0 }, { wind: 6, audience }),
				flightOf([steadyLeg("t", 0, 12, from.slice(3 * i, 3 * i + 3), to.slice(3 * i, 3 * i + 3))]),
			),
		);
		const least = Math.min(...alone.map((zone) => zone?.audience?.distance ?? Number.POSITIVE_INFINITY));
		expect(Math.abs((whole?.audience?.distance ?? 0) - least)).toBeLessThan(0.4);
		const border = Math.min(...alone.map((zone) => zone?.border.distance ?? Number.POSITIVE_INFINITY));
		expect(Math.abs((whole?.border.distance ?? 0) - border)).toBeLessThan(0.4);
	});
});
