/** Bends paths back into the flight volume and out of blocked volumes. */
import type { Box } from "../../show/index.ts";
import { type Bends, leaveWeight, reachWeight } from "./bends.ts";

/** Instants at which paths are held to the flight volume, and to blocked volumes. */
const WITHIN = 8;
const AROUND = 64;
/** Metres kept from a wall, so that what lies between two instants stays clear. */
const HAIR = 0.02;
const CLEAR = 0.15;

export interface Room {
	/** Moves what is outside. @returns by how many metres in all, in the measure of spacing */
	keep(bends: Bends): number;
}

/** @param volume,blocked metres; @param downwash bends are in the measure of spacing */
export function createRoom(bends: Bends, volume: Box, blocked: readonly Box[], downwash: number): Room {
	const scaled = (box: Box): Box => ({
		min: [box.min[0], box.min[1], box.min[2] / downwash],
		max: [box.max[0], box.max[1], box.max[2] / downwash],
	});
	const inside = scaled(volume);
	const boxes = blocked.map(scaled);
	const count = bends.start.length / 3;
	// The side by which each drone passes each box is settled when it first meets it: 0..5 as axis · 2 + (towards max).
	const sides = new Int8Array(count * boxes.length).fill(-1);

	function keep(bent: Bends): number {
		let moved = 0;
		for (let i = 0; i < count; i++) {
			for (let axis = 0; axis < 3; axis++) {
				const at = 3 * i + axis;
				if (bent.leave[at] === 0 && bent.reach[at] === 0) continue;
				for (let k = 1; k < WITHIN; k++) {
					const here = placeOf(bent, at, k / WITHIN);
					const low = inside.min[axis] + HAIR - here;
					const high = inside.max[axis] - HAIR - here;
					if (low <= 0 && high >= 0) continue;
					const ends = [bent.start[at], bent.start[at] + bent.way[at]];
					// A formation that touches the wall: its own ends are all that can be kept to.
					const most = low > 0 ? Math.min(low, Math.min(...ends) - here) : Math.max(high, Math.max(...ends) - here);
					if (low > 0 ? most <= 0 : most >= 0) continue;
					shift(bent, at, k / WITHIN, most);
					moved += Math.abs(most);
				}
			}
			for (let b = 0; b < boxes.length; b++) moved += passBy(bent, i, b);
		}
		return moved;
	}

	function passBy(bent: Bends, i: number, b: number): number {
		const box = boxes[b];
		if (misses(bent, i, box)) return 0;
		const met: number[] = [];
		for (let k = 1; k < AROUND; k++) if (isIn(bent, i, k / AROUND, box)) met.push(k / AROUND);
		if (met.length === 0) return 0;
		const known = i * boxes.length + b;
		if (sides[known] < 0) sides[known] = nearestSide(bent, i, box, met);
		const axis = sides[known] >> 1;
		let moved = 0;
		for (const s of met) {
			const by = pushOut(bent, 3 * i + axis, s, box, sides[known]);
			if (by === 0) continue;
			shift(bent, 3 * i + axis, s, by);
			moved += Math.abs(by);
		}
		return moved;
	}

	/** The side that asks for the least bend and keeps inside the flight volume. */
	function nearestSide(bent: Bends, i: number, box: Box, met: readonly number[]): number {
		let best = 5;
		let least = Infinity;
		for (let side = 0; side < 6; side++) {
			const axis = side >> 1;
			const wall = side % 2 === 0 ? box.min[axis] - CLEAR : box.max[axis] + CLEAR;
			if (wall < inside.min[axis] + HAIR || wall > inside.max[axis] - HAIR) continue;
			// An end beyond the other side would have to come back through the block.
			const at = 3 * i + axis;
			const [start, end] = [bent.start[at], bent.start[at] + bent.way[at]];
			if (side % 2 === 0 ? Math.max(start, end) >= box.max[axis] : Math.min(start, end) <= box.min[axis]) continue;
			let most = 0;
			for (const s of met) {
				const weight = leaveWeight(s) + reachWeight(s);
				most = Math.max(most, Math.abs(pushOut(bent, at, s, box, side)) / weight);
			}
			// Metres: what the measure of spacing shortens is as far to fly.
			if (axis === 2) most *= downwash;
			if (most < least) [least, best] = [most, side];
		}
		return best;
	}
	return { keep };
}

function placeOf({ start, way, leave, reach }: Bends, at: number, s: number): number {
	return start[at] + s * way[at] + leaveWeight(s) * leave[at] + reachWeight(s) * reach[at];
}

/** Moves one coordinate at s with the least change of the bends. */
function shift({ leave, reach }: Bends, at: number, s: number, by: number): void {
	const f = leaveWeight(s);
	const g = reachWeight(s);
	const scale = by / (f * f + g * g);
	leave[at] += scale * f;
	reach[at] += scale * g;
}

function pushOut(bent: Bends, at: number, s: number, box: Box, side: number): number {
	const here = placeOf(bent, at, s);
	const axis = side >> 1;
	return side % 2 === 0 ? Math.min(0, box.min[axis] - CLEAR - here) : Math.max(0, box.max[axis] + CLEAR - here);
}

function isIn(bent: Bends, i: number, s: number, box: Box): boolean {
	for (let axis = 0; axis < 3; axis++) {
		const here = placeOf(bent, 3 * i + axis, s);
		if (here <= box.min[axis] - CLEAR / 2 || here >= box.max[axis] + CLEAR / 2) return false;
	}
	return true;
}

/** Whether the hull of the path lies to one side of the box. */
function misses({ start, way, leave, reach }: Bends, i: number, box: Box): boolean {
	for (let axis = 0; axis < 3; axis++) {
		const at = 3 * i + axis;
		const end = start[at] + way[at];
		// Control points of the cubic in Bernstein form.
		const first = start[at] + (way[at] + leave[at]) / 3;
		const second = end + (reach[at] - way[at]) / 3;
		const low = Math.min(start[at], end, first, second);
		const high = Math.max(start[at], end, first, second);
		if (high <= box.min[axis] - CLEAR || low >= box.max[axis] + CLEAR) return true;
	}
	return false;
}
