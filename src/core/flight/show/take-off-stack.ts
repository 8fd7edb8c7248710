import { pairsWithin } from "../../maths/index.ts";
import type { Limits, Takeoff } from "../../show/index.ts";
import { SPACING_HAIR } from "../../units/index.ts";

/** Above the take-off grid, where the fleet gathers: straight above its places, in layers if the grid is dense. */
export interface Stack {
	/** 3·N metres, drone after drone. */
	readonly positions: Float64Array;
	/** N: which wave each drone climbs in, from 0. */
	readonly waveOf: Int32Array;
	readonly waves: number;
}

/** What a show without a take-off grid of its own does: the schema's defaults. */
export const DEFAULT_TAKEOFF: Pick<Takeoff, "waves" | "interval" | "climbTo"> = { waves: 1, interval: 5, climbTo: 8 };

/**
 * Interleaved waves: drones that stand nearer than the spacing go in different layers, a vertical spacing apart, the
 * highest first. A grid as wide as the spacing needs one layer.
 * @param ground 3·N metres
 */
export function stackOver(ground: Float64Array, limits: Limits, takeoff: typeof DEFAULT_TAKEOFF): Stack {
	const count = ground.length / 3;
	const colour = colourGrid(ground, limits.spacing);
	let layers = 0;
	for (const value of colour) layers = Math.max(layers, value + 1);
	const waves = Math.max(layers, Math.min(takeoff.waves, Math.max(1, count)));
	const waveOf = new Int32Array(count);
	const turns = new Int32Array(Math.max(1, layers));
	const positions = new Float64Array(3 * count);
	const rise = Math.ceil(limits.spacing * limits.downwash * 1000 + SPACING_HAIR * 1000) / 1000;
	for (let i = 0; i < count; i++) {
		const layer = colour[i];
		// More waves than layers: the drones of a layer take turns.
		const shares = Math.floor((waves - 1 - layer) / layers) + 1;
		waveOf[i] = layer + layers * (turns[layer]++ % shares);
		positions[3 * i] = ground[3 * i];
		positions[3 * i + 1] = ground[3 * i + 1];
		const height = ground[3 * i + 2] + takeoff.climbTo + (layers - 1 - layer) * rise;
		positions[3 * i + 2] = Math.round(height * 1000) / 1000;
	}
	return { positions, waveOf, waves };
}

/** Lowest colours such that no two places nearer than `spacing` share one, in the order of the grid. */
function colourGrid(ground: Float64Array, spacing: number): Int32Array {
	const count = ground.length / 3;
	const flat = ground.map((value, k) => (k % 3 === 2 ? 0 : value));
	const pairs = pairsWithin(flat, 1, spacing);
	const neighbours: number[][] = Array.from({ length: count }, () => []);
	for (let k = 0; k < pairs.length; k += 2) {
		neighbours[pairs[k]].push(pairs[k + 1]);
		neighbours[pairs[k + 1]].push(pairs[k]);
	}
	const colour = new Int32Array(count).fill(-1);
	for (let i = 0; i < count; i++) {
		const used = new Set(neighbours[i].map((j) => colour[j]));
		let free = 0;
		while (used.has(free)) free++;
		colour[i] = free;
	}
	return colour;
}
