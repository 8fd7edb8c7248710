import type { TimeLaw } from "../plan.ts";
import { lawOfPhases } from "./phases.ts";
import { minimumJerkTime, type RateLimits, sCurveTime } from "./straight-time.ts";

const WIDTH = 6;

/** The S-curve from s = 0 to 1 at these limits: up to seven cubic pieces, rest to rest. */
export function sCurveLaw(limits: RateLimits): TimeLaw {
	const { acceleration: a, jerk: j } = limits;
	const total = sCurveTime(1, limits);
	const v = Math.min(limits.speed, topSpeed(limits));
	// Length of each jerk phase, and of the constant acceleration between two of them.
	const jerkPhase = v * j >= a * a ? a / j : Math.sqrt(v / j);
	const pushPhase = v * j >= a * a ? v / a - a / j : 0;
	const cruise = total - 4 * jerkPhase - 2 * pushPhase;
	const lengths = [jerkPhase, pushPhase, jerkPhase, cruise, jerkPhase, pushPhase, jerkPhase];
	const jerks = [j, 0, -j, 0, -j, 0, j];
	return lawOfPhases(lengths.map((length, k) => ({ length, jerk: jerks[k] })));
}

/** Speed that an S-curve over 1 reaches when no speed limit holds it. */
function topSpeed({ acceleration: a, jerk: j }: RateLimits): number {
	if (1 >= (2 * a * a * a) / (j * j)) {
		const lag = (a * a) / j;
		return (Math.sqrt(lag * lag + 4 * a) - lag) / 2;
	}
	const phase = Math.cbrt(1 / (2 * j));
	return j * phase * phase;
}

/** Minimum jerk from s = 0 to 1 (Flash & Hogan 1985): 10τ³ − 15τ⁴ + 6τ⁵. */
export function minimumJerkLaw(limits: RateLimits): TimeLaw {
	const T = minimumJerkTime(1, limits);
	return {
		kind: "minimum-jerk",
		borders: Float64Array.of(0, T),
		coefficients: Float64Array.of(0, 0, 0, 10 / T ** 3, -15 / T ** 4, 6 / T ** 5),
	};
}

export function lawOfKind(kind: TimeLaw["kind"], limits: RateLimits): TimeLaw {
	return kind === "s-curve" ? sCurveLaw(limits) : minimumJerkLaw(limits);
}

export function lawDuration(law: TimeLaw): number {
	return law.borders[law.borders.length - 1];
}

/** The same law made slower by a factor: speeds by 1/factor, accelerations by its square, jerks by its cube. */
export function dilate(law: TimeLaw, factor: number): TimeLaw {
	const borders = law.borders.map((time) => time * factor);
	const coefficients = law.coefficients.slice();
	for (let k = 0; k < coefficients.length; k++) coefficients[k] /= factor ** (k % WIDTH);
	return { kind: law.kind, borders, coefficients };
}

/** s at `time` seconds from departure in the law's own duration; 0 before, 1 after. */
export function lawAt(law: TimeLaw, time: number): number {
	const { borders, coefficients } = law;
	const pieces = borders.length - 1;
	if (time <= 0 || pieces === 0) return time <= 0 ? 0 : 1;
	if (time >= borders[pieces]) return 1;
	let piece = 0;
	while (time >= borders[piece + 1]) piece++;
	const t = time - borders[piece];
	let s = 0;
	for (let k = WIDTH - 1; k >= 0; k--) s = s * t + coefficients[piece * WIDTH + k];
	return Math.min(1, Math.max(0, s));
}

/** A law that takes no time, for a leg on which nothing moves. */
export function standingLaw(kind: TimeLaw["kind"]): TimeLaw {
	return { kind, borders: Float64Array.of(0), coefficients: new Float64Array(0) };
}
