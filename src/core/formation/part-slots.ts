import { pairsWithin, smallestGap } from "../maths/index.ts";
import type { Limits } from "../show/index.ts";
import { SPACING_HAIR } from "../units/index.ts";
import { toMillimetre } from "./place.ts";
import { boxOf } from "./reserve.ts";

/** Rounds after which slots that still stand too near are given up. */
const ROUNDS = 600;
/** Metres over the spacing that the slots are parted to: rounding to millimetres takes up to √3 mm away again. */
const HAIR = 2 * SPACING_HAIR;

export interface PartedSlots {
	/** 3·M metres, whole millimetres. */
	readonly positions: Float64Array;
	/** Metres: the longest way that a slot was moved. */
	readonly furthest: number;
}

/**
 * Moves slots that stand nearer than the spacing apart, and no others: each pair in turn is pushed apart along the line
 * between the two, half of what is missing each, until no pair is left (position-based dynamics: Müller, Heidelberger,
 * Hennix & Ratcliff, Journal of Visual Communication and Image Representation 2007). A flat picture stays flat.
 * @param positions 3·M metres
 * @returns null where pushing comes to no end
 */
export function partSlots(positions: Float64Array, limits: Pick<Limits, "spacing" | "downwash">): PartedSlots | null {
	const { spacing, downwash } = limits;
	const wanted = spacing + HAIR;
	const parted = positions.slice();
	// Slots on one place are pushed apart along the picture's two longest sides.
	const box = boxOf(positions);
	const axes = [0, 1, 2].sort((a, b) => box.max[b] - box.min[b] - (box.max[a] - box.min[a]) || a - b);
	for (let round = 0; round < ROUNDS; round++) {
		const pairs = pairsWithin(parted, downwash, wanted - 1e-6);
		if (pairs.length === 0) break;
		for (let k = 0; k < pairs.length; k += 2) pushApart(parted, pairs[k], pairs[k + 1], wanted, downwash, axes);
	}
	for (let k = 0; k < parted.length; k++) parted[k] = toMillimetre(parted[k]);
	if (smallestGap(parted, downwash).distance < spacing) return null;
	let furthest = 0;
	for (let k = 0; k < parted.length; k += 3) {
		const way = Math.hypot(
			parted[k] - positions[k],
			parted[k + 1] - positions[k + 1],
			parted[k + 2] - positions[k + 2],
		);
		furthest = Math.max(furthest, way);
	}
	return { positions: parted, furthest };
}

function pushApart(
	at: Float64Array,
	i: number,
	j: number,
	wanted: number,
	downwash: number,
	axes: readonly number[],
): void {
	const [a, b] = [3 * i, 3 * j];
	const away = [at[b] - at[a], at[b + 1] - at[a + 1], (at[b + 2] - at[a + 2]) / downwash];
	let distance = Math.hypot(away[0], away[1], away[2]);
	if (distance >= wanted) return;
	if (distance < 1e-9) {
		// Any direction is as good: by the golden angle from pair to pair, so that a heap opens to all sides.
		const angle = 2.399963229728653 * (i + j);
		away.fill(0);
		away[axes[0]] = Math.cos(angle) * 1e-3;
		away[axes[1]] = Math.sin(angle) * 1e-3;
		distance = 1e-3;
	}
	const push = (wanted - Math.min(distance, wanted)) / 2 / distance;
	for (let axis = 0; axis < 3; axis++) {
		const step = away[axis] * push * (axis === 2 ? downwash : 1);
		at[a + axis] -= step;
		at[b + axis] += step;
	}
}
