import {
	createBeatMap,
	type Fleet,
	type FleetSlots,
	type Formation,
	type Show,
	type Slots,
	transitionsInTime,
	type Venue,
} from "../show/index.ts";
import { SPACING_HAIR, StarstaveError } from "../units/index.ts";
import { toMillimetre } from "./place.ts";
import { slotsOf } from "./slots-of.ts";

/**
 * Reserve slots: where the drones without a slot in the picture hold, unlit. They lie on level lattices behind the
 * picture, as near to the middle of its back as the venue allows; beside and above it only where the space behind is
 * used up. The lattices are anchored in the venue, not at the picture, so that drones which stay dark through a
 * transition mostly find the same places in the next formation.
 */

/** Lattice pitch over spacing: at √2 × spacing or more, straight flights between reserve slots never conflict. */
const PITCH = 1.5;

/** Horizontal distance from lit drones over spacing: out of each other's downwash, with the width of a drone over. */
const CLEARANCE = 1.5;

/** Most layers tried above and below the middle height before the venue is left. */
const LAYERS = 12;

interface Candidate {
	readonly x: number;
	readonly y: number;
	readonly z: number;
	readonly cost: number;
}

/**
 * Fills a formation up to the fleet. The same picture, fleet and venue always give the same slots.
 * @throws StarstaveError when the picture has more slots than the fleet has drones
 */
export function fillFleet(slots: Slots, fleet: Fleet, venue: Venue, name = "The formation"): FleetSlots {
	const { count } = fleet;
	if (slots.count > count)
		throw new StarstaveError(
			"formation",
			`${name} has ${slots.count} slots, but the fleet has ${count} drones; give it ${count} slots or fewer, or the fleet more drones.`,
		);
	const all = new Float64Array(3 * count);
	all.set(slots.positions);
	if (count > slots.count)
		all.set(reserveSlots(slots.positions, count - slots.count, fleet, venue), slots.positions.length);
	return { ...slots, fleet: count, all };
}

/** Slots of every formation that the fleet can fill; one that the show flies and that has too many slots is an error. */
export function fleetSlotsOf(show: Show): Map<string, FleetSlots> {
	const flown = new Set(transitionsInTime(show, createBeatMap(show.grid)).map((cue) => cue.formation));
	if (show.opening !== null) flown.add(show.opening);
	const filled = new Map<string, FleetSlots>();
	for (const id of show.formations.order) {
		const formation = show.formations.byId[id];
		const slots = slotsOf(formation, show.fleet.limits.downwash);
		if (slots.count > show.fleet.count && !flown.has(id)) continue;
		filled.set(id, fillFleet(slots, show.fleet, show.venue, `Formation ${nameOf(formation)}`));
	}
	return filled;
}

function nameOf(formation: Formation): string {
	return formation.name === "" ? formation.id : formation.name;
}

/** @returns 3·wanted metres, rounded to whole millimetres */
function reserveSlots(lit: Float64Array, wanted: number, fleet: Fleet, venue: Venue): Float64Array {
	const { spacing, downwash } = fleet.limits;
	const pitch = toMillimetre(spacing * PITCH + SPACING_HAIR);
	const layer = toMillimetre(spacing * downwash + SPACING_HAIR);
	const box = boxOf(lit);
	const middle = [0, 1, 2].map((axis) => (box.min[axis] + box.max[axis]) / 2);
	const { min, max } = venue.volume;
	// Middle height of the picture, snapped to a layer, a layer clear of floor and ceiling where there is room.
	const base = snap(clamp(middle[2], Math.min(min[2] + 2 * layer, middle[2]), Math.max(max[2] - layer, min[2])), layer);
	const behind = box.max[1] + spacing * CLEARANCE;
	// The half disc that the slots fill, several times over, so that a vast venue costs no more than a small one.
	const reach = pitch * (4 * Math.sqrt(wanted) + 20);
	const left = Math.max(min[0], box.min[0] - reach);
	const right = Math.min(max[0], box.max[0] + reach);
	const near = Math.max(min[1], box.min[1] - reach);
	const away = Math.min(max[1], behind + reach);
	const found: Candidate[] = [];
	for (let step = 0; step < 2 * LAYERS && found.length < wanted; step++) {
		// 0, +1, −1, +2, … Odd layers are shifted by half a pitch each way, out of the downwash of their neighbours.
		const level = step % 2 === 0 ? -step / 2 : (step + 1) / 2;
		const z = toMillimetre(base + level * layer);
		if (z < min[2] || z > max[2]) continue;
		const shift = level % 2 === 0 ? 0 : pitch / 2;
		const places: Candidate[] = [];
		for (let i = Math.ceil((left - shift) / pitch); i * pitch + shift <= right; i++)
			for (let j = Math.ceil((near - shift) / pitch); j * pitch + shift <= away; j++) {
				const x = toMillimetre(i * pitch + shift);
				const y = toMillimetre(j * pitch + shift);
				const cost = costOf(x, y, box, middle, behind);
				if (cost === null || isBlocked(x, y, z, venue, spacing)) continue;
				places.push({ x, y, z, cost });
			}
		places.sort((a, b) => a.cost - b.cost || a.y - b.y || a.x - b.x);
		found.push(...places.slice(0, wanted - found.length));
	}
	// A venue too small for the fleet: on behind it, row on row; the check then says out of venue.
	const across = Math.max(1, Math.floor((max[0] - min[0]) / pitch));
	for (let i = 0; found.length < wanted; i++) {
		const x = toMillimetre(min[0] + (i % across) * pitch);
		const y = toMillimetre(Math.max(behind, max[1] + pitch) + Math.floor(i / across) * pitch);
		found.push({ x, y, z: base, cost: 0 });
	}
	const out = new Float64Array(3 * wanted);
	found.forEach(({ x, y, z }, i) => {
		out.set([x, y, z], 3 * i);
	});
	return out;
}

/**
 * How far out of the way a place is, or null where a dark drone must not stand. Behind the picture is always right: a
 * line of sight from the audience to a lit drone never passes there. Beside it counts double, since it is seen.
 */
function costOf(
	x: number,
	y: number,
	box: ReturnType<typeof boxOf>,
	middle: readonly number[],
	behind: number,
): number | null {
	const far = Math.hypot(x - middle[0], y - behind);
	if (y >= behind) return far;
	const clear = behind - box.max[1];
	const beside = x <= box.min[0] - clear || x >= box.max[0] + clear;
	// Beside, yet no nearer to the audience than the picture's own front.
	if (beside && y >= box.min[1]) return 2 * far + 1000;
	return null;
}

function isBlocked(x: number, y: number, z: number, venue: Venue, spacing: number): boolean {
	return venue.blocked.some(
		({ min, max }) =>
			x > min[0] - spacing &&
			x < max[0] + spacing &&
			y > min[1] - spacing &&
			y < max[1] + spacing &&
			z > min[2] - spacing &&
			z < max[2] + spacing,
	);
}

/** Corners of the box about 3·M coordinates. */
export function boxOf(positions: Float64Array): { min: [number, number, number]; max: [number, number, number] } {
	const min: [number, number, number] = [Infinity, Infinity, Infinity];
	const max: [number, number, number] = [-Infinity, -Infinity, -Infinity];
	for (let i = 0; i < positions.length; i++) {
		min[i % 3] = Math.min(min[i % 3], positions[i]);
		max[i % 3] = Math.max(max[i % 3], positions[i]);
	}
	return { min, max };
}

function clamp(value: number, least: number, most: number): number {
	return Math.min(Math.max(value, least), Math.max(least, most));
}

function snap(value: number, step: number): number {
	return toMillimetre(Math.round(value / step) * step);
}
