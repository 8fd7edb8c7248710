/** How sure a stretch is: its likeness against the next best place in the old soundtrack that it could come from. */
import { type Line, oldOn } from "./line.ts";
import type { FeatureTable } from "./listen.ts";

const PROBES = 32;
/** Seconds around the stretch's own line that don't count as another place. */
const OWN = 0.4;
/** Likeness from which on a stretch is as good as certain to be this music, and lead over the next best for full trust. */
const CLEAR = 0.55;
const LEAD = 0.15;

export interface Likelihood {
	/** Mean likeness along the line, −1..1. */
	readonly own: number;
	/** Of the next best place on a line of the same rate. */
	readonly next: number;
	/** 0..1. */
	readonly confidence: number;
}

/** @param from new seconds, likewise `to` */
export function likelihoodOf(
	old: FeatureTable,
	current: FeatureTable,
	line: Line,
	from: number,
	to: number,
	exact: boolean,
): Likelihood {
	const { dimensions } = old;
	const sums = new Float64Array(2 * old.frames);
	const counts = new Int32Array(2 * old.frames);
	let own = 0;
	let heard = 0;
	for (let p = 0; p < PROBES; p++) {
		const time = from + ((to - from) * (p + 0.5)) / PROBES;
		const frame = Math.min(current.frames - 1, Math.round(time * current.rate));
		const at = Math.round(oldOn(line, time) * old.rate);
		if (at < 0 || at >= old.frames) continue;
		const a = frame * dimensions;
		heard++;
		for (let j = 0; j < old.frames; j++) {
			const b = j * dimensions;
			let sum = 0;
			for (let d = 0; d < dimensions; d++) sum += current.values[a + d] * old.values[b + d];
			// Index by how far the diagonal lies from the stretch's own.
			const shift = j - at + old.frames;
			if (shift < 0 || shift >= sums.length) continue;
			sums[shift] += sum;
			counts[shift]++;
			if (j === at) own += sum;
		}
	}
	own /= Math.max(1, heard);
	let next = 0;
	const apart = Math.round(OWN * old.rate);
	for (let shift = 0; shift < sums.length; shift++) {
		if (Math.abs(shift - old.frames) <= apart || counts[shift] < 0.6 * heard || heard === 0) continue;
		next = Math.max(next, sums[shift] / counts[shift]);
	}
	const lead = Math.max(0, Math.min(1, (own - next) / LEAD));
	// Where the samples are the same only another place with the same samples is a rival.
	const clear = exact ? 1 : Math.max(0, Math.min(1, own / CLEAR));
	return { own, next, confidence: clear * (0.5 + 0.5 * lead) };
}
