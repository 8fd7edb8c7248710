import { type Measure, measuredLength } from "./measure.ts";

/**
 * Slots along a curve: ring, line, helix. Equal steps are equal lengths of arc in the measure of spacing; where the
 * curve is a circle laid flat or a straight line this is exact, else the arc is summed over fine chords.
 */

/** Chords for each turn of a curve: the arc is short of the true one by a share of (2π/4096)²/24 ≈ 1e-7. */
const CHORDS_PER_TURN = 4096;

/** A point of the unit curve at u in [0, 1], written into `out` (x, y, z). */
type Curve3 = (u: number, out: Float64Array) => void;

/** @returns 3·count numbers on a ring of `radius` m upright in x–z, from the right-hand end counter-clockwise */
export function spreadRing(count: number, radius: number, measure: Measure): Float64Array {
	const circle: Curve3 = (u, out) => {
		out[0] = radius * Math.cos(2 * Math.PI * u);
		out[1] = 0;
		out[2] = radius * Math.sin(2 * Math.PI * u);
	};
	return spreadCurve(circle, CHORDS_PER_TURN, count, true, measure);
}

/** @returns 3·count numbers on a line along x, centred, from left to right; a single slot stands in its middle */
export function spreadLine(count: number, length: number): Float64Array {
	const out = new Float64Array(3 * count);
	if (count === 1) return out;
	for (let i = 0; i < count; i++) out[3 * i] = -length / 2 + (length * i) / (count - 1);
	return out;
}

/** @returns 3·count numbers on a screw line about z, from its lower end up, centred */
export function spreadHelix(
	count: number,
	radius: number,
	height: number,
	turns: number,
	measure: Measure,
): Float64Array {
	const screw: Curve3 = (u, out) => {
		const angle = 2 * Math.PI * turns * u;
		out[0] = radius * Math.cos(angle);
		out[1] = radius * Math.sin(angle);
		out[2] = height * (u - 0.5);
	};
	const chords = Math.min(200_000, Math.ceil(CHORDS_PER_TURN * Math.max(1, turns)));
	return spreadCurve(screw, chords, count, false, measure);
}

/** Walks the curve once in chords and drops a slot at every equal step of measured length. */
function spreadCurve(curve: Curve3, chords: number, count: number, closed: boolean, measure: Measure): Float64Array {
	const here = new Float64Array(3);
	const before = new Float64Array(3);
	// Measured length from the start to the end of each chord.
	const reached = new Float64Array(chords + 1);
	curve(0, before);
	for (let i = 1; i <= chords; i++) {
		curve(i / chords, here);
		reached[i] =
			reached[i - 1] + measuredLength(measure, here[0] - before[0], here[1] - before[1], here[2] - before[2]);
		before.set(here);
	}
	const steps = closed ? count : count - 1;
	const out = new Float64Array(3 * count);
	let chord = 0;
	for (let i = 0; i < count; i++) {
		const wanted = steps === 0 ? reached[chords] / 2 : (reached[chords] * i) / steps;
		while (chord < chords - 1 && reached[chord + 1] < wanted) chord++;
		const span = reached[chord + 1] - reached[chord];
		const part = span > 0 ? (wanted - reached[chord]) / span : 0;
		// On the curve itself, not on the chord: the parameter is interpolated.
		curve((chord + part) / chords, here);
		out.set(here, 3 * i);
	}
	return out;
}
