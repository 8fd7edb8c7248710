import { boxOf, sizeToSpacing, slotsOf } from "../formation/index.ts";
import { createRandom } from "../maths/index.ts";
import type { Fleet, Formation, Shape, Venue } from "../show/index.ts";
import { StarstaveError } from "../units/index.ts";

/**
 * The figures that a rough cut chooses from: each sized so that its closest slots are a little more than √2 × spacing
 * apart (then no straight flight between two of them can conflict, Turpin, Michael & Kumar, IJRR 2014), or, where that
 * is too large for the venue, as near to spacing as it must be.
 */
export interface Figure {
	readonly formation: Formation;
	/** How it sits with the music: 0 calm … 1 full. */
	readonly energy: number;
}

/** Lowest slot, m: over heads, trees and lamps. */
const LOWEST = 20;
/** From the audience-side edge of the volume to the nearest slot, m. */
const AWAY = 20;
/** How far another seed moves a figure from the energy that it suits best. */
const SHUFFLE = 0.9;
const MARGINS = [1.45, 1.2, 1.06];

interface Idea {
	readonly name: string;
	readonly energy: number;
	readonly tilt?: number;
	readonly turn?: number;
	/** Null where so many drones make no such figure. */
	readonly shape: (drones: number) => Shape | null;
}

/** Columns × rows ≤ drones, as near to a square (times `wide`) as may be. */
function columnsAndRows(drones: number, wide: number): { columns: number; rows: number } {
	const columns = Math.max(1, Math.min(drones, Math.round(Math.sqrt(drones * wide))));
	return { columns, rows: Math.max(1, Math.floor(drones / columns)) };
}

const IDEAS: readonly Idea[] = [
	{
		name: "swell of the sea",
		energy: 0.1,
		shape: (n) => (n < 12 ? null : { kind: "wave", ...columnsAndRows(n, 2.2), pitch: 2, rise: 2.5, wavelength: 24 }),
	},
	{ name: "ring", energy: 0.3, shape: (n) => (n < 3 || n > 40 ? null : { kind: "ring", count: n, radius: 10 }) },
	{
		name: "lying ring",
		energy: 0.2,
		tilt: 90,
		shape: (n) => (n < 3 || n > 80 ? null : { kind: "ring", count: n, radius: 10 }),
	},
	{ name: "disc", energy: 0.45, tilt: 20, shape: (n) => (n < 7 ? null : { kind: "disc", count: n, radius: 10 }) },
	{ name: "lying disc", energy: 0.15, tilt: 90, shape: (n) => (n < 7 ? null : { kind: "disc", count: n, radius: 10 }) },
	{
		name: "helix",
		energy: 0.75,
		shape: (n) =>
			n < 12
				? null
				: { kind: "helix", count: n, radius: 10, height: 24, turns: Math.max(2, Math.round(Math.sqrt(n) / 5)) },
	},
	{ name: "sphere", energy: 1, shape: (n) => (n < 12 ? null : { kind: "sphere", count: n, radius: 10 }) },
	{
		name: "cube",
		energy: 0.85,
		turn: 30,
		shape: (n) => {
			const side = Math.floor(Math.cbrt(n) + 1e-9);
			return side < 3
				? null
				: { kind: "grid", columns: side, rows: side, layers: Math.max(1, Math.floor(n / (side * side))), pitch: 2 };
		},
	},
	{
		name: "raised field",
		energy: 0.6,
		tilt: 40,
		shape: (n) => (n < 4 ? null : { kind: "grid", ...columnsAndRows(n, 1.6), layers: 1, pitch: 2 }),
	},
	{ name: "line", energy: 0.25, shape: (n) => (n > 60 ? null : { kind: "line", count: n, length: 2 * n }) },
	{
		name: "slanting line",
		energy: 0.55,
		turn: 35,
		shape: (n) => (n > 40 ? null : { kind: "line", count: n, length: 2 * n }),
	},
];

/**
 * Figures for a fleet in a venue; another seed than 1 deals their energies out anew; the whole fleet is in each as far as its shape
 * allows.
 * @throws StarstaveError where the venue is too small for any
 */
export function chooseFigures(fleet: Fleet, venue: Venue, seed: number): Figure[] {
	const figures: Figure[] = [];
	for (const idea of IDEAS) {
		const raw = idea.shape(fleet.count);
		const formation = raw && fitFigure(idea, raw, fleet, venue);
		if (formation) figures.push({ formation, energy: idea.energy });
	}
	if (figures.length === 0) {
		throw new StarstaveError(
			"fleet",
			`No figure of ${fleet.count} drones fits into the flight volume at a spacing of ${fleet.limits.spacing} m: fewer drones or a larger volume would.`,
		);
	}
	const centred = centreHeights(figures, venue);
	if (seed === 1) return centred;
	const random = createRandom(seed);
	return centred.map(({ formation, energy }) => ({ formation, energy: energy + SHUFFLE * (random.next() - 0.5) }));
}

function fitFigure(idea: Idea, raw: Shape, fleet: Fleet, venue: Venue): Formation | null {
	const { min, max } = venue.volume;
	for (const margin of MARGINS) {
		const tilt = idea.tilt ?? 0;
		const shape = sizeToSpacing(raw, fleet.limits, margin, tilt);
		const at = (position: [number, number, number]): Formation => ({
			id: idea.name.replaceAll(" ", "-"),
			name: idea.name,
			shape,
			place: { position, turn: idea.turn ?? 0, tilt, scale: 1 },
		});
		const box = boxOf(slotsOf(at([0, 0, 0]), fleet.limits.downwash).positions);
		const [wide, deep, high] = [0, 1, 2].map((axis) => box.max[axis] - box.min[axis]);
		const room = [max[0] - min[0] - 2, max[1] - min[1] - AWAY - 2, max[2] - Math.max(min[2], LOWEST) - 2];
		if (wide > room[0] || deep > room[1] || high > room[2]) continue;
		const y = min[1] + AWAY + Math.max(deep / 2, Math.min(40, (room[1] - deep) / 2 + deep / 2));
		return at([
			(min[0] + max[0]) / 2,
			Math.min(y, max[1] - 2 - deep / 2),
			LOWEST + high / 2 - (box.min[2] + box.max[2]) / 2,
		]);
	}
	return null;
}

/** All middles at one height where the ceiling allows: descents are the slowest part of any transition. */
function centreHeights(figures: readonly Figure[], venue: Venue): Figure[] {
	const middles = figures.map(({ formation }) => formation.place.position[2]);
	const ordered = [...middles].sort((a, b) => a - b);
	const common = ordered[Math.floor(ordered.length * 0.7)];
	return figures.map(({ formation, energy }, i) => {
		const half = middles[i] - LOWEST;
		const middle = Math.min(Math.max(common, middles[i]), venue.volume.max[2] - half - 2);
		const [x, y] = formation.place.position;
		return {
			energy,
			formation: { ...formation, place: { ...formation.place, position: [x, y, Math.max(middle, middles[i])] } },
		};
	});
}

const WIDER = "-wider";

/** The same figure a little larger, or back at its size: what a fleet can always do in a few beats. */
export function breathe(formation: Formation): Formation {
	const wide = formation.id.endsWith(WIDER);
	return {
		...formation,
		id: wide ? formation.id.slice(0, -WIDER.length) : formation.id + WIDER,
		name: wide ? formation.name.replace(/, wider$/, "") : `${formation.name}, wider`,
		place: { ...formation.place, scale: wide ? 1 : 1.12 },
	};
}
