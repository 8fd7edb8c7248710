import { fallThrough } from "./fall.ts";

/** Falls by height, climb and level speed, looked up instead of integrated for each drone and instant. */
export interface FallTable {
	/**
	 * The fall of a drone that moves at so much through the air.
	 * @param height m over the ground; @param climb,across m/s at the start, across through the air
	 * @param out time, drift, down, across on the ground, as in Fall
	 */
	lookUp(height: number, climb: number, across: number, out: Float64Array): void;
	/**
	 * The worst that the wind can do to a drone that moves at so much over the ground, whichever way it blows.
	 * @param across m/s, level, over the ground
	 * @param out seconds of the longest fall, metres of the farthest, m/s of the fastest
	 */
	worst(height: number, climb: number, across: number, out: Float64Array): void;
}

export interface FallRange {
	readonly terminalSpeed: number;
	/** m/s. */
	readonly wind: number;
	/** m; m/s, level over the ground. What is asked beyond these is answered with the nearest. */
	readonly highest: number;
	readonly climb: { readonly least: number; readonly most: number };
	readonly across: number;
}

const HEIGHTS = 40;
const CLIMBS = 8;
const ACROSS = 12;
/** Sides that the wind may come from, seen from where the drone is going. */
const SIDES = 36;

export function createFallTable(range: FallRange): FallTable {
	const { terminalSpeed, highest, across, wind } = range;
	const depths = Float64Array.from({ length: HEIGHTS + 1 }, (_, k) => highest * (k / HEIGHTS) ** 2);
	const falls = new Nodes(range, across + wind, 4);
	falls.fill((up, level, set) => {
		for (const [k, { time, drift, down, across: left }] of fallThrough(level, up, terminalSpeed, depths).entries())
			set(k, [time, drift, down, left]);
	});
	const worst = new Nodes(range, across, 3);
	const fall = new Float64Array(4);
	worst.fill((up, level, set) => {
		for (let k = 0; k <= HEIGHTS; k++) {
			let [time, distance, speed] = [0, 0, 0];
			for (let side = 0; side < SIDES; side++) {
				const angle = (2 * Math.PI * side) / SIDES;
				const [wx, wy] = [wind * Math.cos(angle), wind * Math.sin(angle)];
				const through = Math.hypot(level - wx, wy);
				const [ax, ay] = through > 0 ? [(level - wx) / through, -wy / through] : [0, 0];
				falls.read(depths[k], up, through, fall);
				time = Math.max(time, fall[0]);
				distance = Math.max(distance, Math.hypot(wx * fall[0] + ax * fall[1], wy * fall[0] + ay * fall[1]));
				speed = Math.max(speed, Math.hypot(fall[2], wx + ax * fall[3], wy + ay * fall[3]));
			}
			set(k, [time, distance, speed]);
		}
	});
	return {
		lookUp: (height, up, level, out) => falls.read(height, up, level, out),
		worst: (height, up, level, out) => worst.read(height, up, level, out),
	};
}

/**
 * Values over climb, level speed and height, linear between the nodes; heights are spaced by their roots, since a fall's
 * time grows by the root of its height.
 */
class Nodes {
	/** (CLIMBS + 1) × (ACROSS + 1) × (HEIGHTS + 1) × width. */
	private readonly values: Float64Array;
	private readonly range: FallRange;
	private readonly across: number;
	private readonly width: number;

	constructor(range: FallRange, across: number, width: number) {
		this.range = range;
		this.across = across;
		this.width = width;
		this.values = new Float64Array((CLIMBS + 1) * (ACROSS + 1) * (HEIGHTS + 1) * width);
	}

	fill(column: (climb: number, across: number, set: (k: number, values: readonly number[]) => void) => void): void {
		const { least, most } = this.range.climb;
		for (let i = 0; i <= CLIMBS; i++) {
			for (let j = 0; j <= ACROSS; j++) {
				column(least + ((most - least) * i) / CLIMBS, (this.across * j) / ACROSS, (k, values) => {
					this.values.set(values, ((i * (ACROSS + 1) + j) * (HEIGHTS + 1) + k) * this.width);
				});
			}
		}
	}

	read(height: number, climb: number, across: number, out: Float64Array): void {
		const { range, values, width } = this;
		const { least, most } = range.climb;
		const u = place((climb - least) / (most - least), CLIMBS);
		const v = place(across / this.across, ACROSS);
		const w = place(Math.sqrt(Math.max(0, height) / range.highest), HEIGHTS);
		const i = Math.min(CLIMBS - 1, Math.floor(u));
		const j = Math.min(ACROSS - 1, Math.floor(v));
		const k = Math.min(HEIGHTS - 1, Math.floor(w));
		const [a, b, c] = [u - i, v - j, w - k];
		const near = ((i * (ACROSS + 1) + j) * (HEIGHTS + 1) + k) * width;
		const over = (HEIGHTS + 1) * width;
		const far = near + (ACROSS + 1) * over;
		for (let m = 0; m < width; m++) {
			const low = (1 - b) * values[near + m] + b * values[near + over + m];
			const lowUp = (1 - b) * values[near + width + m] + b * values[near + over + width + m];
			const high = (1 - b) * values[far + m] + b * values[far + over + m];
			const highUp = (1 - b) * values[far + width + m] + b * values[far + over + width + m];
			out[m] = (1 - c) * ((1 - a) * low + a * high) + c * ((1 - a) * lowUp + a * highUp);
		}
	}
}

/** A share 0..1 as a place among the nodes; where the range has no width, the first. */
function place(share: number, nodes: number): number {
	return share > 0 ? Math.min(nodes, share * nodes) : 0;
}
