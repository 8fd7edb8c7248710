import type { Limits } from "../../show/index.ts";
import type { Paths } from "../paths/polynomial-paths.ts";
import type { TimeLaw } from "../plan.ts";
import type { RateLimits } from "./straight-time.ts";
import { dilate, lawDuration, lawOfKind, standingLaw } from "./time-law.ts";

/**
 * The time law that the whole fleet shares on straight lines: ṡ, s̈ and s⃛ as fast as the drone that limits each allows.
 * @returns a law of no duration where nothing moves
 */
export function straightLaw(paths: Paths, count: number, limits: Limits, kind: TimeLaw["kind"]): TimeLaw {
	const rates = straightRates(paths, count, limits);
	return rates === null ? standingLaw(kind) : lawOfKind(kind, rates);
}

function straightRates(paths: Paths, count: number, limits: Limits): RateLimits | null {
	let level = 0;
	let up = 0;
	let down = 0;
	let far = 0;
	for (let i = 0; i < count; i++) {
		const x = paths.coefficients[6 * i + 1];
		const y = paths.coefficients[6 * i + 3];
		const z = paths.coefficients[6 * i + 5];
		const flat = Math.sqrt(x * x + y * y);
		if (flat > level) level = flat;
		if (z > up) up = z;
		if (-z > down) down = -z;
		const whole = Math.sqrt(x * x + y * y + z * z);
		if (whole > far) far = whole;
	}
	if (far === 0) return null;
	return {
		speed: Math.min(limits.horizontal / level, limits.climb / up, limits.descent / down),
		acceleration: limits.acceleration / far,
		jerk: limits.jerk / far,
	};
}

/** Instants on each piece of the law at which a curved path is looked at; the proof gives exact peaks afterwards. */
const INSTANTS = 5;
const ROUNDS = 5;

/**
 * A law for any paths: its shape is adjusted until speed, acceleration and jerk of what is flown are each about at their
 * limit, then dilated so that all of them hold at the instants looked at.
 */
export function lawForPaths(paths: Paths, count: number, limits: Limits, kind: TimeLaw["kind"]): TimeLaw {
	if (paths.degree === 1) return straightLaw(paths, count, limits, kind);
	let rates = firstRates(paths, count, limits);
	if (rates === null) return standingLaw(kind);
	let best: TimeLaw | null = null;
	for (let round = 0; round < ROUNDS; round++) {
		const law = lawOfKind(kind, rates);
		const ratio = peakRatios(paths, count, law, limits);
		const factor = Math.max(ratio.speed, Math.sqrt(ratio.acceleration), Math.cbrt(ratio.jerk));
		const fitted = dilate(law, factor);
		if (best === null || lawDuration(fitted) < lawDuration(best)) best = fitted;
		rates = {
			speed: rates.speed / ratio.speed,
			acceleration: rates.acceleration / ratio.acceleration,
			jerk: rates.jerk / ratio.jerk,
		};
	}
	return best ?? standingLaw(kind);
}

/** Rates as if every path were straight and as long as its control polygon's reach. */
function firstRates(paths: Paths, count: number, limits: Limits): RateLimits | null {
	const width = paths.degree + 1;
	let far = 0;
	for (let i = 0; i < count; i++) {
		let squared = 0;
		for (let axis = 0; axis < 3; axis++) {
			let reach = 0;
			for (let k = 1; k < width; k++) reach += Math.abs(paths.coefficients[(3 * i + axis) * width + k]);
			squared += reach * reach;
		}
		far = Math.max(far, Math.sqrt(squared));
	}
	if (far === 0) return null;
	return {
		speed: limits.horizontal / far,
		acceleration: limits.acceleration / far,
		jerk: limits.jerk / far,
	};
}

interface PeakRatios {
	readonly speed: number;
	readonly acceleration: number;
	readonly jerk: number;
}

/** Largest of what is flown over what is allowed, at the instants looked at. */
export function peakRatios(paths: Paths, count: number, law: TimeLaw, limits: Limits): PeakRatios {
	const { degree, coefficients } = paths;
	const width = degree + 1;
	let level = 0;
	let up = 0;
	let down = 0;
	let acceleration = 0;
	let jerk = 0;
	const first = new Float64Array(3);
	const second = new Float64Array(3);
	const third = new Float64Array(3);
	for (let p = 0; p + 1 < law.borders.length; p++) {
		for (let k = 0; k <= INSTANTS; k++) {
			const t = ((law.borders[p + 1] - law.borders[p]) * k) / INSTANTS;
			const [s, s1, s2, s3] = ratesAt(law, p, t);
			for (let i = 0; i < count; i++) {
				for (let axis = 0; axis < 3; axis++) {
					const start = (3 * i + axis) * width;
					let d1 = 0;
					let d2 = 0;
					let d3 = 0;
					let value = 0;
					for (let m = degree; m >= 0; m--) {
						d3 = d3 * s + d2;
						d2 = d2 * s + d1;
						d1 = d1 * s + value;
						value = value * s + coefficients[start + m];
					}
					d2 *= 2;
					d3 *= 6;
					first[axis] = d1 * s1;
					second[axis] = d2 * s1 * s1 + d1 * s2;
					third[axis] = d3 * s1 * s1 * s1 + 3 * d2 * s1 * s2 + d1 * s3;
				}
				level = Math.max(level, first[0] * first[0] + first[1] * first[1]);
				if (first[2] > up) up = first[2];
				if (-first[2] > down) down = -first[2];
				acceleration = Math.max(acceleration, second[0] * second[0] + second[1] * second[1] + second[2] * second[2]);
				jerk = Math.max(jerk, third[0] * third[0] + third[1] * third[1] + third[2] * third[2]);
			}
		}
	}
	return {
		speed: Math.max(Math.sqrt(level) / limits.horizontal, up / limits.climb, down / limits.descent),
		acceleration: Math.sqrt(acceleration) / limits.acceleration,
		jerk: Math.sqrt(jerk) / limits.jerk,
	};
}

/** s and its first three derivatives by time, t seconds into piece p. */
function ratesAt(law: TimeLaw, p: number, t: number): [number, number, number, number] {
	const c = law.coefficients.subarray(6 * p, 6 * p + 6);
	return [
		c[0] + t * (c[1] + t * (c[2] + t * (c[3] + t * (c[4] + t * c[5])))),
		c[1] + t * (2 * c[2] + t * (3 * c[3] + t * (4 * c[4] + t * 5 * c[5]))),
		2 * c[2] + t * (6 * c[3] + t * (12 * c[4] + t * 20 * c[5])),
		6 * c[3] + t * (24 * c[4] + t * 60 * c[5]),
	];
}
