import { pairsWithin, smallestGap } from "../maths/index.ts";
import type { Limits } from "../show/index.ts";
import { GAP_TOLERANCE } from "../units/index.ts";
import { micro } from "./flight-paths.ts";

/**
 * Proof of the flight paths as they leave: rounded to the file's decimals, flown straight from row to row. The smooth
 * paths were proven before; what sampling adds is the chord error, a·Δt²/8 for a drone and twice that for a pair, and
 * this looks at the outcome itself: over each piece the distance of two drones is that of the origin to a segment in
 * relative space, in closed form. Speeds of a piece are means of the smooth path's, so they need no second look beyond
 * the rounding; they are measured all the same.
 */
export interface RowProof {
	/**
	 * m: smallest distance in the measure of spacing of two drones above the ground, where it is under spacing or little
	 * more; Infinity where no two ever come that near.
	 */
	readonly gap: number;
	/** Seconds and drones from 0 at the smallest gap; null where no two come near. */
	readonly at: { readonly seconds: number; readonly drones: readonly [number, number] } | null;
	/** m: likewise where one of the two is below `GROUND`. */
	readonly groundGap: number;
	/** m/s: peaks of the straight pieces. */
	readonly horizontal: number;
	readonly climb: number;
	readonly descent: number;
	/** One sentence for each limit that is broken; empty: proven. */
	readonly broken: readonly string[];
}

export interface RowSource {
	readonly drones: number;
	/** Row k is the time k / rate. */
	readonly rate: number;
	readonly first: number;
	readonly last: number;
	/** Fills 3·N metres. */
	positionsAt(seconds: number, out: Float64Array): void;
	/** 3·N metres on the take-off grid. */
	readonly ground: Float64Array;
}

/** m: below this height only the take-off grid's own pitch counts. */
const GROUND = 1;
/** m/s: cells are rounded to 0.5 µm at both ends of a piece, at no more than 100 rows a second. */
const SPEED_TOLERANCE = 1e-4;

interface Closest {
	distance: number;
	share: number;
}

/** Distance of the origin to the segment u + s·w for s in [from, to]. */
function closest(u: readonly number[], w: readonly number[], from: number, to: number): Closest {
	const length = w[0] * w[0] + w[1] * w[1] + w[2] * w[2];
	const free = length === 0 ? from : -(u[0] * w[0] + u[1] * w[1] + u[2] * w[2]) / length;
	const share = Math.min(to, Math.max(from, free));
	return { distance: Math.hypot(u[0] + share * w[0], u[1] + share * w[1], u[2] + share * w[2]), share };
}

/** The part of a piece in which a drone is at `GROUND` or above, as [from, to]; from > to where there is none. */
function aloft(z0: number, z1: number): readonly [number, number] {
	if (z0 >= GROUND && z1 >= GROUND) return [0, 1];
	if (z0 < GROUND && z1 < GROUND) return [1, 0];
	const crossing = (GROUND - z0) / (z1 - z0);
	return z0 < z1 ? [crossing, 1] : [0, crossing];
}

/** Proves every piece of the rows against spacing, the grid's own pitch, and the speed limits. */
export function proveRows(source: RowSource, limits: Limits, onProgress: (share: number) => void = () => {}): RowProof {
	const { drones, rate, first, last } = source;
	const { spacing, downwash } = limits;
	const scale = [1, 1, 1 / downwash];
	const pitch = Math.min(spacing, smallestGap(source.ground, downwash).distance);
	let from = new Float64Array(3 * drones);
	let to = new Float64Array(3 * drones);
	const middle = new Float64Array(3 * drones);
	let gap = Number.POSITIVE_INFINITY;
	let at: RowProof["at"] = null;
	let groundGap = Number.POSITIVE_INFINITY;
	let horizontal = 0;
	let climb = 0;
	let descent = 0;
	const u = [0, 0, 0];
	const w = [0, 0, 0];

	const fill = (row: number, out: Float64Array): void => {
		source.positionsAt(row / rate, out);
		for (let i = 0; i < out.length; i++) out[i] = micro(out[i]) / 1e6;
	};
	const judgePair = (i: number, j: number, row: number): void => {
		for (let axis = 0; axis < 3; axis++) {
			u[axis] = (from[3 * i + axis] - from[3 * j + axis]) * scale[axis];
			w[axis] = (to[3 * i + axis] - to[3 * j + axis]) * scale[axis] - u[axis];
		}
		const a = aloft(from[3 * i + 2], to[3 * i + 2]);
		const b = aloft(from[3 * j + 2], to[3 * j + 2]);
		const begins = Math.max(a[0], b[0]);
		const ends = Math.min(a[1], b[1]);
		if (begins <= ends) {
			const near = closest(u, w, begins, ends);
			if (near.distance < gap) {
				gap = near.distance;
				at = { seconds: (row + near.share) / rate, drones: [i, j] };
			}
		}
		if (begins > ends || begins > 0 || ends < 1) groundGap = Math.min(groundGap, closest(u, w, 0, 1).distance);
	};

	/** How far any drone moves against the fleet's mean over this piece, half of it, scaled; −1 where none moves. */
	const measureStep = (): number => {
		const mean = [0, 0, 0];
		let moves = false;
		for (let i = 0; i < to.length; i++) {
			const step = to[i] - from[i];
			if (step !== 0) moves = true;
			mean[i % 3] += step / drones;
		}
		if (!moves) return -1;
		let reach = 0;
		for (let i = 0; i < drones; i++) {
			const dx = to[3 * i] - from[3 * i];
			const dy = to[3 * i + 1] - from[3 * i + 1];
			const dz = to[3 * i + 2] - from[3 * i + 2];
			horizontal = Math.max(horizontal, Math.hypot(dx, dy) * rate);
			climb = Math.max(climb, dz * rate);
			descent = Math.max(descent, -dz * rate);
			reach = Math.max(reach, Math.hypot(dx - mean[0], dy - mean[1], (dz - mean[2]) * scale[2]) / 2);
		}
		return reach;
	};

	fill(first, from);
	for (let row = first; row < last; row++) {
		fill(row + 1, to);
		const step = measureStep();
		// A fleet that stands keeps the distances of the piece before; the first piece is looked at whatever it does.
		if (step >= 0 || row === first) {
			for (let i = 0; i < to.length; i++) middle[i] = (from[i] + to[i]) / 2;
			// Two drones within spacing somewhere on this piece are within this in its middle (with a hair for the last bits).
			const pairs = pairsWithin(middle, downwash, spacing + 2 * Math.max(0, step) + 0.01);
			for (let k = 0; k < pairs.length; k += 2) judgePair(pairs[k], pairs[k + 1], row);
		}
		[from, to] = [to, from];
		if (row % 100 === 0) onProgress((row - first) / Math.max(1, last - first));
	}

	const broken: string[] = [];
	const speed = (name: string, value: number, limit: number): void => {
		if (value > limit + SPEED_TOLERANCE) broken.push(`${name} reaches ${value.toFixed(3)} m/s, over ${limit} m/s`);
	};
	speed("horizontal speed", horizontal, limits.horizontal);
	speed("climb", climb, limits.climb);
	speed("descent", descent, limits.descent);
	const place = at as RowProof["at"];
	if (place !== null && gap < spacing - GAP_TOLERANCE) {
		const [i, j] = place.drones;
		broken.push(
			`drones ${i + 1} and ${j + 1} come to ${gap.toFixed(4)} m at ${place.seconds.toFixed(2)} s, under ${spacing} m`,
		);
	}
	if (groundGap < pitch - GAP_TOLERANCE) {
		broken.push(
			`near the ground two drones come to ${groundGap.toFixed(4)} m, under the grid's pitch of ${pitch.toFixed(3)} m`,
		);
	}
	return { gap, at, groundGap, horizontal, climb, descent, broken };
}
