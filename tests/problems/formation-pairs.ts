import { fillFleet, sizeToSpacing, slotsOf } from "../../src/core/formation/index.ts";
import { createShow, type Formation, type Shape } from "../../src/core/show/index.ts";

/**
 * Pairs of formations that are hard on a planner, as data: both at `times` the spacing exactly, the second set away from
 * the first. Grids turned by odd angles, cubes turned by 45°, text to text, raster shapes with massive ties, sphere,
 * helix, discs.
 */
export interface FormationPair {
	readonly name: string;
	readonly from: Float64Array;
	readonly to: Float64Array;
}

type Draw = (count: number) => { shape: Shape; turn?: number; tilt?: number };

const side = (count: number, power: number): number => Math.max(1, Math.round(count ** (1 / power)));
const square: Draw = (n) => ({
	shape: { kind: "grid", columns: side(n, 2), rows: Math.floor(n / side(n, 2)), layers: 1, pitch: 1.5 },
});
const cube: Draw = (n) => {
	const edge = Math.floor(Math.cbrt(n) + 1e-9);
	return { shape: { kind: "grid", columns: edge, rows: edge, layers: Math.floor(n / edge ** 2), pitch: 1.5 } };
};
const turned =
	(draw: Draw, turn: number, tilt = 0): Draw =>
	(n) => ({ ...draw(n), turn, tilt });
const text =
	(words: string): Draw =>
	(n) => ({ shape: { kind: "text", text: words, height: 20, count: n, style: "filled" } });
const sphere: Draw = (n) => ({ shape: { kind: "sphere", count: n, radius: 10 } });
const helix: Draw = (n) => ({
	shape: { kind: "helix", count: n, radius: 12, height: 40, turns: Math.max(3, Math.round(Math.sqrt(n) / 4)) },
});
const disc: Draw = (n) => ({ shape: { kind: "disc", count: n, radius: 10 } });
const wave: Draw = (n) => ({
	shape: { kind: "wave", columns: side(n, 2), rows: Math.floor(n / side(n, 2)), pitch: 1.5, rise: 3, wavelength: 20 },
});

const PAIRS: readonly (readonly [name: string, from: Draw, to: Draw, away: number])[] = [
	["grid → same grid turned 31°", square, turned(square, 31), 0],
	["grid → grid turned 90°, 30 m on", square, turned(square, 90), 30],
	["grid → upright grid", square, turned(square, 0, 90), 20],
	["cube → cube turned 45°", cube, turned(cube, 45), 0],
	["cube → sphere", cube, sphere, 0],
	["grid → sphere", square, sphere, 0],
	["sphere → helix", sphere, helix, 20],
	["helix → disc", helix, disc, 0],
	["disc → text", disc, text("HARBOUR"), 10],
	["text → text", text("LAMPS"), text("BOATS"), 0],
	["text → grid", text("NIGHT"), square, 30],
	["wave → cube", wave, cube, 25],
	["disc → disc turned upright", turned(disc, 0, 90), disc, 0],
];

const LIMITS = { spacing: 1.5, downwash: 2 };

/** @param times of the spacing at which both ends stand: 1 is as close as may be */
export function formationPairs(count: number, times = 1): FormationPair[] {
	const show = createShow(count);
	const slots = (draw: Draw, x: number): Float64Array => {
		const { shape, turn = 0, tilt = 0 } = draw(count);
		const sized = sizeToSpacing(shape, LIMITS, times, tilt);
		const formation: Formation = {
			id: "f",
			name: "",
			shape: sized,
			place: { position: [x, 60, 120], turn, tilt, scale: 1 },
		};
		const venue = { ...show.venue, volume: { min: [-600, -600, 0], max: [600, 600, 600] } as typeof show.venue.volume };
		return fillFleet(slotsOf(formation, LIMITS.downwash), show.fleet, venue).all;
	};
	return PAIRS.map(([name, from, to, away]) => ({ name, from: slots(from, 0), to: slots(to, away) }));
}
