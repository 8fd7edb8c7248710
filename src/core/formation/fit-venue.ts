import type { Box, Venue } from "../show/index.ts";
import { boxOf } from "./reserve.ts";

/** Moves are told in steps of this many metres, away from the wall. */
const STEP = 0.1;

/**
 * The shortest move along one axis at a time that brings slots into the flight volume and out of what is blocked. Which
 * is shortest is looked for axis by axis, not over all directions.
 * @param positions 3·M metres
 * @returns metres along x, y, z; null where no move does
 */
export function moveIntoVenue(
	positions: Float64Array,
	{ volume, blocked }: Pick<Venue, "volume" | "blocked">,
): [number, number, number] | null {
	const box = boxOf(positions);
	const move: [number, number, number] = [0, 0, 0];
	for (let axis = 0; axis < 3; axis++) {
		if (box.max[axis] - box.min[axis] > volume.max[axis] - volume.min[axis]) return null;
		const low = volume.min[axis] - box.min[axis];
		const high = volume.max[axis] - box.max[axis];
		if (low > 0) move[axis] = Math.min(high, Math.ceil(low / STEP) * STEP);
		else if (high < 0) move[axis] = Math.max(low, Math.floor(high / STEP) * STEP);
	}
	const moved = movedBy(positions, move);
	if (!blocked.some((one) => anyInside(moved, one))) return move;
	let best: [number, number, number] | null = null;
	for (let axis = 0; axis < 3; axis++) {
		for (const sign of [1, -1]) {
			const extra = clearAlong(moved, axis, sign, blocked);
			const end = box[sign > 0 ? "max" : "min"][axis] + move[axis] + sign * extra;
			if (sign > 0 ? end > volume.max[axis] : end < volume.min[axis]) continue;
			const tried: [number, number, number] = [...move];
			tried[axis] += sign * extra;
			if (best === null || Math.hypot(...tried) < Math.hypot(...best)) best = tried;
		}
	}
	return best;
}

/** Metres along an axis after which no slot is inside any of the boxes. */
function clearAlong(positions: Float64Array, axis: number, sign: number, boxes: readonly Box[]): number {
	let way = 0;
	for (;;) {
		let more = 0;
		for (const box of boxes) {
			for (let k = 0; k < positions.length; k += 3) {
				const at = [positions[k], positions[k + 1], positions[k + 2]];
				at[axis] += sign * way;
				if (!isInside(at, box)) continue;
				more = Math.max(more, sign > 0 ? box.max[axis] - at[axis] : at[axis] - box.min[axis]);
			}
		}
		if (more === 0) return way;
		way = Math.ceil((way + more) / STEP - 1e-9) * STEP;
	}
}

function movedBy(positions: Float64Array, move: readonly number[]): Float64Array {
	return positions.map((value, k) => value + move[k % 3]);
}

function anyInside(positions: Float64Array, box: Box): boolean {
	for (let k = 0; k < positions.length; k += 3) {
		if (isInside([positions[k], positions[k + 1], positions[k + 2]], box)) return true;
	}
	return false;
}

function isInside(at: readonly number[], { min, max }: Box): boolean {
	return at.every((value, axis) => value > min[axis] + 1e-9 && value < max[axis] - 1e-9);
}

/** How much smaller slots have to be so that the box about them fits the flight volume: at most 1. */
export function shareThatFits(positions: Float64Array, { volume }: Pick<Venue, "volume">): number {
	const box = boxOf(positions);
	let share = 1;
	for (let axis = 0; axis < 3; axis++) {
		const size = box.max[axis] - box.min[axis];
		if (size > 0) share = Math.min(share, (volume.max[axis] - volume.min[axis]) / size);
	}
	return share;
}
