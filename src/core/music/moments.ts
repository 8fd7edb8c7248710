/**
 * Moments: places where the music asks for something. Judged on beats and bars, not on the clock, so that each one is a
 * place a cue can snap to. Levels are compared within the track itself; there is no published measure for these, the
 * thresholds are the project's own.
 */
import type { Bar, Curve } from "../show/index.ts";
import type { Moment } from "./analysis.ts";

/** Bars on either side over which a change is judged. */
const SPAN = 4;
/** LU by which a drop or a break changes the level of the bars around. */
const STEP = 3;
/** LU by which a build rises over its bars. */
const RISE = 4;
/** Most moments of each kind for each minute: what is everywhere calls for nothing. */
const A_MINUTE = 3;

/** Level, bass and onset of each bar. */
interface BarLevels {
	/** Beat index of the bar's first beat. */
	readonly beat: Int32Array;
	/** LU. */
	readonly loud: Float64Array;
	/** 0..1 */
	readonly low: Float64Array;
}

function meanBetween(values: Float32Array, rate: number, from: number, to: number): number {
	const first = Math.max(0, Math.round(from * rate));
	const last = Math.min(values.length, Math.max(first + 1, Math.round(to * rate)));
	let sum = 0;
	for (let i = first; i < last; i++) sum += values[i];
	return last > first ? sum / (last - first) : 0;
}

function measureBars(
	beats: Float64Array,
	bars: readonly Bar[],
	momentary: { values: Float32Array; rate: number },
	low: Curve | undefined,
): BarLevels {
	const beat = Int32Array.from(bars, (bar) => bar.beat);
	const loud = new Float64Array(bars.length);
	const lows = new Float64Array(bars.length);
	for (let k = 0; k < bars.length; k++) {
		const from = beats[beat[k]];
		const to = k + 1 < bars.length ? beats[beat[k + 1]] : beats[beats.length - 1];
		// A momentary window ends where it stands and looks back 0.4 s: read 0.2 s later.
		loud[k] = Math.max(-50, meanBetween(momentary.values, momentary.rate, from + 0.2, to + 0.2));
		lows[k] = low ? meanBetween(low.values, low.rate, from, to) : 0;
	}
	return { beat, loud, low: lows };
}

const mean = (values: Float64Array, from: number, to: number): number => {
	let sum = 0;
	for (let i = from; i < to; i++) sum += values[i];
	return sum / Math.max(1, to - from);
};

/** Keeps the strongest, none within two bars of a stronger one of its kind. */
function thin(found: Moment[], most: number, apart: number): Moment[] {
	const kept: Moment[] = [];
	for (const moment of [...found].sort((a, b) => b.strength - a.strength || a.beat - b.beat)) {
		if (kept.length >= most) break;
		if (kept.every((k) => Math.abs(k.beat - moment.beat) >= apart)) kept.push(moment);
	}
	return kept;
}

const share = (x: number): number => Math.max(0, Math.min(1, x));

/**
 * Drops (level and bass come in together), breaks (they go), builds (where a rise over bars begins) and hits (single
 * onsets that stand alone). In order of their beats.
 */
export function findMoments(
	beats: Float64Array,
	bars: readonly Bar[],
	momentary: { readonly values: Float32Array; readonly rate: number },
	curves: readonly Curve[],
): Moment[] {
	if (bars.length < 4) return [];
	const levels = measureBars(
		beats,
		bars,
		momentary,
		curves.find((curve) => curve.name === "low"),
	);
	const drops: Moment[] = [];
	const breaks: Moment[] = [];
	const builds: Moment[] = [];
	for (let k = 1; k < bars.length; k++) {
		const before = Math.max(0, k - SPAN);
		const after = Math.min(bars.length, k + SPAN);
		// The change must come with this bar: two bars after against two before, confirmed by the longer span.
		const now = mean(levels.loud, k, Math.min(after, k + 2)) - mean(levels.loud, Math.max(before, k - 2), k);
		const lasting = mean(levels.loud, k, after) - mean(levels.loud, before, k);
		const bass = mean(levels.low, k, after) - mean(levels.low, before, k);
		if (now > STEP && lasting > STEP * 0.7 && bass > 0.05) {
			drops.push({ kind: "drop", beat: levels.beat[k], strength: share((now + 10 * bass) / 20) });
		}
		if (now < -STEP && lasting < -STEP * 0.7) {
			breaks.push({ kind: "break", beat: levels.beat[k], strength: share((-now - 10 * bass) / 20) });
		}
		const end = k + SPAN;
		if (end <= bars.length) {
			let rising = true;
			for (let j = k + 1; j < end; j++) if (levels.loud[j] < levels.loud[j - 1] - 0.5) rising = false;
			const rise = levels.loud[end - 1] - levels.loud[k];
			if (rising && rise > RISE) builds.push({ kind: "build", beat: levels.beat[k], strength: share(rise / 15) });
		}
	}
	const minutes = Math.max(1, (beats[beats.length - 1] - beats[0]) / 60);
	const most = Math.ceil(A_MINUTE * minutes);
	const apart = 2 * bars[0].beatsPerBar;
	return [
		...thin(drops, most, apart),
		...thin(breaks, most, apart),
		...thin(builds, most, apart * 2),
		...thin(findHits(beats, curves), most, apart),
	].sort((a, b) => a.beat - b.beat || a.kind.localeCompare(b.kind));
}

/** Beats whose onset stands far above all others for two beats on either side. */
function findHits(beats: Float64Array, curves: readonly Curve[]): Moment[] {
	const onset = curves.find((curve) => curve.name === "onset");
	if (!onset) return [];
	const heights = Float64Array.from(beats, (time) => {
		let most = 0;
		const centre = Math.round(time * onset.rate);
		for (let i = centre - 2; i <= centre + 2; i++) most = Math.max(most, onset.values[i] ?? 0);
		return most;
	});
	const found: Moment[] = [];
	for (let k = 0; k < beats.length; k++) {
		let around = 0;
		let count = 0;
		for (let j = Math.max(0, k - 4); j <= Math.min(beats.length - 1, k + 4); j++) {
			if (j === k) continue;
			around += heights[j];
			count++;
		}
		const stands = heights[k] - around / Math.max(1, count);
		if (heights[k] > 0.6 && stands > 0.35) found.push({ kind: "hit", beat: k, strength: share(stands) });
	}
	return found;
}
