import type { ReadTable } from "./read-flight-paths.ts";

/** What the fleet may do, in metres and seconds; taken from the show by whoever asks. */
export interface OracleLimits {
	readonly horizontal: number;
	readonly climb: number;
	readonly descent: number;
	readonly acceleration: number;
	readonly jerk: number;
	readonly spacing: number;
	readonly downwash: number;
}

/** What is forgiven, each with its reason. */
export const ORACLE_TOLERANCE = {
	/** m: slots are rounded to whole millimetres (√3 mm on a gap), cells to micrometres. */
	gap: 0.002,
	/** m/s: two cells of 0.5 µm over the time of a row are 10⁻⁵ m/s at 10 Hz; held to 10⁻⁴. */
	speed: 1e-4,
	/** m/s²: the second difference of cells rounded to 0.5 µm is 2 µm, over (0.1 s)² 2·10⁻⁴; over (0.02 s)² 5·10⁻³. */
	accelerationCells: 2e-6,
	/** m/s³: likewise the third difference, 4 µm over the cube of the row's time. */
	jerkCells: 4e-6,
	/** m: the end of the flight against its beginning. */
	home: 1e-6,
	/** m: below this height drones stand on, or rise from, the take-off grid. */
	ground: 1,
} as const;

export interface OracleVerdict {
	readonly drones: number;
	readonly rows: number;
	/** Peaks over all drones and rows. */
	readonly horizontal: number;
	readonly climb: number;
	readonly descent: number;
	readonly acceleration: number;
	readonly jerk: number;
	/** Smallest distance in the measure of spacing between two drones of which one at least is above the ground. */
	readonly gap: number;
	readonly gapAt: { readonly seconds: number; readonly drones: readonly [number, number] } | null;
	/** Smallest distance between two drones on the ground, m. */
	readonly groundGap: number;
	/** m: how far the last row is from the first, and how high the first and last rows are. */
	readonly home: number;
	readonly startHeight: number;
	readonly endHeight: number;
	/** One sentence for each limit that is broken. */
	readonly broken: readonly string[];
}

/**
 * Judges a fleet that flies straight from row to row. Speeds are those of the straight pieces; acceleration and jerk
 * are second and third differences, which can't exceed the largest value of the smooth path between the rows (each is
 * its weighted mean). Gaps are closed forms over each piece: the distance of the origin to a segment in relative space.
 * Pairs come from a grid of cells wide enough that no closer pair is left out.
 */
export function judgeFlightPaths(table: ReadTable, limits: OracleLimits): OracleVerdict {
	const { drones, times, values } = table;
	const rows = times.length;
	const dt = (times[rows - 1] - times[0]) / Math.max(1, rows - 1);
	let horizontal = 0;
	let climb = 0;
	let descent = 0;
	let acceleration = 0;
	let jerk = 0;
	const width = 3 * drones;
	const at = (row: number, drone: number, axis: number): number => values[row * width + 3 * drone + axis];
	for (let row = 0; row + 1 < rows; row++) {
		for (let drone = 0; drone < drones; drone++) {
			let second = 0;
			let third = 0;
			const step = [0, 0, 0];
			for (let axis = 0; axis < 3; axis++) {
				const p1 = at(row + 1, drone, axis);
				const p0 = at(row, drone, axis);
				step[axis] = (p1 - p0) / dt;
				if (row >= 1) second += ((p1 - 2 * p0 + at(row - 1, drone, axis)) / dt ** 2) ** 2;
				if (row >= 2) {
					const difference = p1 - 3 * p0 + 3 * at(row - 1, drone, axis) - at(row - 2, drone, axis);
					third += (difference / dt ** 3) ** 2;
				}
			}
			horizontal = Math.max(horizontal, Math.hypot(step[0], step[1]));
			climb = Math.max(climb, step[2]);
			descent = Math.max(descent, -step[2]);
			acceleration = Math.max(acceleration, Math.sqrt(second));
			jerk = Math.max(jerk, Math.sqrt(third));
		}
	}
	const separation = judgeGaps(table, limits);
	let home = 0;
	let startHeight = 0;
	let endHeight = 0;
	for (let drone = 0; drone < drones; drone++) {
		const away = [0, 1, 2].map((axis) => at(rows - 1, drone, axis) - at(0, drone, axis));
		home = Math.max(home, Math.hypot(...away));
		startHeight = Math.max(startHeight, at(0, drone, 2));
		endHeight = Math.max(endHeight, at(rows - 1, drone, 2));
	}
	const broken: string[] = [];
	const hold = (name: string, value: number, limit: number, slack: number): void => {
		if (value > limit + slack) broken.push(`${name} is ${value}, over ${limit}`);
	};
	hold("horizontal speed", horizontal, limits.horizontal, ORACLE_TOLERANCE.speed);
	hold("climb", climb, limits.climb, ORACLE_TOLERANCE.speed);
	hold("descent", descent, limits.descent, ORACLE_TOLERANCE.speed);
	const cells = Math.sqrt(3);
	hold("acceleration", acceleration, limits.acceleration, (cells * ORACLE_TOLERANCE.accelerationCells) / dt ** 2);
	hold("jerk", jerk, limits.jerk, (cells * ORACLE_TOLERANCE.jerkCells) / dt ** 3);
	if (separation.gap < limits.spacing - ORACLE_TOLERANCE.gap) {
		const { gapAt } = separation;
		broken.push(`gap is ${separation.gap} at ${gapAt?.seconds} s between drones ${gapAt?.drones.map((i) => i + 1)}`);
	}
	// On the ground the pitch that the grid has at first may not shrink.
	let pitch = limits.spacing;
	for (let i = 0; i < drones; i++) {
		for (let j = 0; j < i; j++)
			pitch = Math.min(pitch, Math.hypot(at(0, i, 0) - at(0, j, 0), at(0, i, 1) - at(0, j, 1)));
	}
	if (separation.groundGap < pitch - ORACLE_TOLERANCE.gap) {
		broken.push(`near the ground two drones come to ${separation.groundGap} m, under the grid's pitch of ${pitch} m`);
	}
	if (home > ORACLE_TOLERANCE.home) broken.push(`a drone ends ${home} m from where it began`);
	return {
		drones,
		rows,
		horizontal,
		climb,
		descent,
		acceleration,
		jerk,
		...separation,
		home,
		startHeight,
		endHeight,
		broken,
	};
}

/** Smallest gaps over every piece, by brute force over the pairs that a grid of cells leaves. */
function judgeGaps(table: ReadTable, limits: OracleLimits): Pick<OracleVerdict, "gap" | "gapAt" | "groundGap"> {
	const { drones, times, values } = table;
	const width = 3 * drones;
	let gap = Number.POSITIVE_INFINITY;
	let groundGap = Number.POSITIVE_INFINITY;
	let gapAt: OracleVerdict["gapAt"] = null;
	const middle = new Float64Array(width);
	for (let row = 0; row + 1 < times.length; row++) {
		const from = row * width;
		const to = from + width;
		let reach = 0;
		for (let i = 0; i < drones; i++) {
			let half = 0;
			for (let axis = 0; axis < 3; axis++) {
				const a = values[from + 3 * i + axis];
				const b = values[to + 3 * i + axis];
				const scale = axis === 2 ? 1 / limits.downwash : 1;
				middle[3 * i + axis] = ((a + b) / 2) * scale;
				half += (((b - a) / 2) * scale) ** 2;
			}
			reach = Math.max(reach, Math.sqrt(half));
		}
		// Two drones closer than spacing somewhere on this piece are closer than this in the middle of it.
		const cell = limits.spacing + 2 * reach + 1e-6;
		const cells = new Map<string, number[]>();
		for (let i = 0; i < drones; i++) {
			const key = [0, 1, 2].map((axis) => Math.floor(middle[3 * i + axis] / cell)).join();
			const held = cells.get(key);
			if (held === undefined) cells.set(key, [i]);
			else held.push(i);
		}
		for (let i = 0; i < drones; i++) {
			const base = [0, 1, 2].map((axis) => Math.floor(middle[3 * i + axis] / cell));
			for (let near = 0; near < 27; near++) {
				const key = [
					base[0] + (near % 3) - 1,
					base[1] + (Math.floor(near / 3) % 3) - 1,
					base[2] + Math.floor(near / 9) - 1,
				];
				for (const j of cells.get(key.join()) ?? []) {
					if (j <= i) continue;
					judgePair(i, j, row, from, to);
				}
			}
		}
	}
	return { gap, gapAt, groundGap };

	function judgePair(i: number, j: number, row: number, from: number, to: number): void {
		const u = [0, 0, 0];
		const w = [0, 0, 0];
		for (let axis = 0; axis < 3; axis++) {
			const scale = axis === 2 ? 1 / limits.downwash : 1;
			u[axis] = (values[from + 3 * i + axis] - values[from + 3 * j + axis]) * scale;
			w[axis] = (values[to + 3 * i + axis] - values[to + 3 * j + axis]) * scale - u[axis];
		}
		const rise = (drone: number): readonly [number, number] => [
			values[from + 3 * drone + 2],
			values[to + 3 * drone + 2],
		];
		const [begin, end] = flownShare(rise(i), rise(j));
		// On the ground, below 1 m, only the grid's own pitch counts.
		if (begin > 0 || end < 1) groundGap = Math.min(groundGap, nearest(u, w, 0, 1).distance);
		if (begin > end) return;
		const { distance, share } = nearest(u, w, begin, end);
		if (distance < gap) {
			gap = distance;
			gapAt = { seconds: times[row] + share * (times[row + 1] - times[row]), drones: [i, j] };
		}
	}
}

/** Smallest |u + s·w| for s in [begin, end]. */
function nearest(u: readonly number[], w: readonly number[], begin: number, end: number) {
	const length = w[0] ** 2 + w[1] ** 2 + w[2] ** 2;
	const free = length === 0 ? begin : -(u[0] * w[0] + u[1] * w[1] + u[2] * w[2]) / length;
	const share = Math.min(end, Math.max(begin, free));
	return { share, distance: Math.hypot(u[0] + share * w[0], u[1] + share * w[1], u[2] + share * w[2]) };
}

/** The share of a piece in which both drones are above the ground, from their heights at its ends; begin > end: none. */
function flownShare(...heights: readonly (readonly [number, number])[]): readonly [number, number] {
	let begin = 0;
	let end = 1;
	for (const [low, high] of heights) {
		const cross = (ORACLE_TOLERANCE.ground - low) / (high - low);
		if (low < ORACLE_TOLERANCE.ground && high < ORACLE_TOLERANCE.ground) return [1, 0];
		if (low < ORACLE_TOLERANCE.ground) begin = Math.max(begin, cross);
		if (high < ORACLE_TOLERANCE.ground) end = Math.min(end, cross);
	}
	return [begin, end];
}
