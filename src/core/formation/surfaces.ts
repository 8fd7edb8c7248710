import { type Measure, uprightShare } from "./measure.ts";

/**
 * Slots over areas: grid, wave, disc, sphere. The sphere is a golden-angle spiral of equal areas (Vogel 1979; González
 * 2010) on the spheroid that the sphere becomes in the measure of spacing.
 */

/** π(3 − √5): successive turns by it never line up. */
const GOLDEN_ANGLE = Math.PI * (3 - Math.sqrt(5));

/** @returns slots row after row (x fastest), layer on layer; layers stand `pitch / upright share` apart */
export function spreadGrid(
	columns: number,
	rows: number,
	layers: number,
	pitch: number,
	measure: Measure,
): Float64Array {
	const out = new Float64Array(3 * columns * rows * layers);
	const layerPitch = pitch / uprightShare(measure);
	let at = 0;
	for (let k = 0; k < layers; k++)
		for (let j = 0; j < rows; j++)
			for (let i = 0; i < columns; i++) {
				out[at++] = (i - (columns - 1) / 2) * pitch;
				out[at++] = (j - (rows - 1) / 2) * pitch;
				out[at++] = (k - (layers - 1) / 2) * layerPitch;
			}
	return out;
}

/** @returns slots of a level sheet, row after row, lifted to a sine wave that runs along x; a crest over the middle */
export function spreadWave(
	columns: number,
	rows: number,
	pitch: number,
	rise: number,
	wavelength: number,
): Float64Array {
	const out = new Float64Array(3 * columns * rows);
	let at = 0;
	for (let j = 0; j < rows; j++)
		for (let i = 0; i < columns; i++) {
			const x = (i - (columns - 1) / 2) * pitch;
			out[at++] = x;
			out[at++] = (j - (rows - 1) / 2) * pitch;
			out[at++] = rise * Math.cos((2 * Math.PI * x) / wavelength);
		}
	return out;
}

/**
 * The `count` points of a hexagonal lattice nearest to the middle, upright in x–z, stretched so that the outermost
 * stands at `radius`. Hexagonal in the measure: rows are as far apart as columns where it counts.
 */
export function spreadDisc(count: number, radius: number, measure: Measure): Float64Array {
	const share = uprightShare(measure);
	const row = Math.sqrt(3) / 2 / share;
	// A disc of `reach` columns holds π·reach²·share·2/√3 points; half as much again leaves nothing out at its rim.
	const reach = Math.ceil(1.5 * Math.sqrt((count * Math.sqrt(3)) / (2 * Math.PI * share))) + 2;
	const rows = Math.ceil(reach / row);
	const points: { x: number; z: number; far: number }[] = [];
	for (let j = -rows; j <= rows; j++)
		for (let i = -reach; i <= reach; i++) {
			const x = i + (j % 2 === 0 ? 0 : 0.5);
			const z = j * row;
			points.push({ x, z, far: Math.round(1e9 * (x * x + z * z)) });
		}
	points.sort((a, b) => a.far - b.far || a.z - b.z || a.x - b.x);
	const outermost = Math.sqrt(points[count - 1].far / 1e9);
	const stretch = outermost > 0 ? radius / outermost : 0;
	const out = new Float64Array(3 * count);
	for (let i = 0; i < count; i++) {
		out[3 * i] = points[i].x * stretch;
		out[3 * i + 2] = points[i].z * stretch;
	}
	return out;
}

/**
 * Equal areas of the spheroid for each slot, the pole of the spiral upright. A tilt leaves a sphere as it is, so the
 * spiral is laid against the tilt and stays even.
 */
export function spreadSphere(count: number, radius: number, measure: Measure): Float64Array {
	const out = new Float64Array(3 * count);
	const flat = 1 / measure.downwash ** 2;
	const whole = spheroidArea(1, flat);
	for (let i = 0; i < count; i++) {
		const u = heightAtArea(whole * ((2 * i + 1) / count - 1), flat);
		const across = radius * Math.sqrt(Math.max(0, 1 - u * u));
		const angle = GOLDEN_ANGLE * i;
		const away = across * Math.sin(angle);
		const up = radius * u;
		out[3 * i] = across * Math.cos(angle);
		// Undone by the tilt of the formation's place.
		out[3 * i + 1] = away * measure.cosTilt + up * measure.sinTilt;
		out[3 * i + 2] = up * measure.cosTilt - away * measure.sinTilt;
	}
	return out;
}

/** ∫₀ᵘ √(q + (1 − q)·v²) dv: area from the equator to height u of a unit sphere squashed to √q, over 2π. */
function spheroidArea(u: number, q: number): number {
	const b = 1 - q;
	if (b < 1e-12) return u;
	return 0.5 * (u * Math.sqrt(q + b * u * u) + (q / Math.sqrt(b)) * Math.asinh(u * Math.sqrt(b / q)));
}

/** The height u in [−1, 1] up to which the area from the equator is `area`: bisection, since area rises with u. */
function heightAtArea(area: number, q: number): number {
	let low = -1;
	let high = 1;
	for (let i = 0; i < 60; i++) {
		const middle = (low + high) / 2;
		if (spheroidArea(middle, q) < area) low = middle;
		else high = middle;
	}
	return (low + high) / 2;
}
