/**
 * The most likely walk of a pointer through beats, after Krebs, Böck and Widmer, "An efficient state-space model for
 * joint tempo and meter tracking" (2015).
 *
 * Done otherwise here: inside a beat that model only moves on, so it is solved beat by beat instead of state by state.
 * A beat that falls on frame t came from one that fell d frames earlier, where d lies within a frame and a half of the
 * pointer's interval; between beats the interval changes at a cost that grows with the logarithm of the change, which
 * makes the search over all changes two running maxima (Felzenszwalb and Huttenlocher, "Distance transforms of sampled
 * functions", 2012). The walk may begin and end anywhere. Bars are laid over beats afterwards (lay-bars.ts), which lets
 * them hear harmony beat by beat.
 */
import type { ActivationCurves } from "./analysis.ts";

/** Frames a second at which the pointer moves. */
const RATE = 100;
/** Beats a minute. */
const SLOWEST = 50;
const FASTEST = 225;
/** Step between neighbouring intervals, as a ratio. */
const TEMPO_STEP = 1.02;
/** Cost of a change of interval by a factor e. */
const TEMPO_CHANGE = 150;
/** Cost of any change of interval, however great: music does jump. */
const TEMPO_JUMP = 35;
/** Intervals that a cheap change may reach; further costs more than a jump (12 · ln 1.02 · 150 = 36). */
const REACH = 12;
/** Cost of a beat that falls a frame off its interval. */
const JITTER = 0.7;
/** Log-odds are held within this. */
const ODDS_LIMIT = 6.4;
/** Added to a beat's log-odds: less than the fifteenth of frames that lie near a beat asks for, as training already weighed beats. */
const BEAT_ODDS = 2;
/** Most people tap near here (Moelants 2002, McKinney and Moelants 2006); broad, or it loses whole collections. */
const PRIOR_CENTRE = 118;
const PRIOR_OCTAVES = 0.8;
const PRIOR_WEIGHT = 0.45;
/** Frames kept of the past: more than the longest beat, and no power of two, whose strides share few cache lines. */
const RING = 125;
/** What a walk begins with: a little less than nothing, so that it doesn't begin anew without reason. */
const START_COST = -2;
/** What a second of music before the first beat or after the last costs: people go on counting through a faint bar. */
const UNCOVERED = 4;
/** Share by which a guided walk may leave its guide's interval. */
const GUIDE_WIDTH = 0.15;

/** Durations tried for each interval: its nearest whole number of frames and one either way. */
const DURATIONS = 3;
const START = 254;
const JUMP = 255;

/** Log-odds of a beat at each hundredth of a second, the sum of three frames (a beat is not a point). */
export function scoreBeats(activation: ActivationCurves): Float64Array {
	const { beat, rate } = activation;
	const frames = Math.max(0, Math.floor(((beat.length - 1) / rate) * RATE) + 1);
	const odds = Float64Array.from({ length: frames }, (_, t) => {
		const at = (t / RATE) * rate;
		const i = Math.min(beat.length - 1, Math.floor(at));
		const next = Math.min(beat.length - 1, i + 1);
		const p = beat[i] + (beat[next] - beat[i]) * (at - i);
		const value = Math.log(Math.max(p, 1e-6) / Math.max(1 - p, 1e-6)) + BEAT_ODDS;
		return Math.max(-ODDS_LIMIT, Math.min(ODDS_LIMIT, value));
	});
	return odds.map((x, t) => odds[Math.max(0, t - 1)] + x + odds[Math.min(frames - 1, t + 1)]);
}

/** Log-prior of one beat at an interval in seconds. */
export function priorOf(interval: number): number {
	const octaves = Math.log2(60 / interval / PRIOR_CENTRE) / PRIOR_OCTAVES;
	return -0.5 * PRIOR_WEIGHT * octaves * octaves;
}

/**
 * Frame by frame the intervals that need looking at: those allowed in any of the frames that a beat can reach it from,
 * and one round of the ring before, so that what the ring still holds of an interval is overwritten when it ceases.
 */
function reachOf({ low, high }: { low: Uint8Array; high: Uint8Array }): { low: Uint8Array; high: Uint8Array } {
	const spread = (values: Uint8Array, isBetter: (a: number, b: number) => boolean): Uint8Array => {
		const out = new Uint8Array(values.length);
		// A queue of frames whose values only get worse: its head is the best of the last two rounds.
		const queue: number[] = [];
		let head = 0;
		for (let t = 0; t < values.length; t++) {
			while (queue.length > head && !isBetter(values[queue[queue.length - 1]], values[t])) queue.pop();
			queue.push(t);
			if (queue[head] <= t - 2 * RING) head++;
			out[t] = values[queue[head]];
		}
		return out;
	};
	return { low: spread(low, (a, b) => a < b), high: spread(high, (a, b) => a > b) };
}

/** The intervals that a walk near `factor` times its guide's may take: first and last index for each frame. */
function guideBand(
	guide: Float64Array,
	factor: number,
	intervals: readonly number[],
	frames: number,
): { low: Uint8Array; high: Uint8Array } {
	const low = new Uint8Array(frames);
	const high = new Uint8Array(frames).fill(intervals.length - 1);
	let k = 0;
	for (let t = 0; t < frames; t++) {
		while (k + 2 < guide.length && guide[k + 1] * RATE < t) k++;
		const wanted = (guide[k + 1] - guide[k]) * RATE * factor;
		const index = Math.log(wanted / intervals[0]) / Math.log(TEMPO_STEP);
		const width = GUIDE_WIDTH / Math.log(TEMPO_STEP);
		low[t] = Math.max(0, Math.min(intervals.length - 1, Math.round(index - width)));
		high[t] = Math.max(0, Math.min(intervals.length - 1, Math.round(index + width)));
	}
	return { low, high };
}

/**
 * The most likely walk over scores as `scoreBeats` gives them.
 * @param guide beats (at least two) and a factor: the walk then keeps near factor times their interval
 * @param onProgress called with 0..1 about fifty times
 * @returns beats in seconds, not yet moved onto the sound's own onsets
 */
export function walkBeats(
	score: Float64Array,
	guide: { readonly beats: Float64Array; readonly factor: number } | null = null,
	onProgress?: (share: number) => void,
): Float64Array {
	const frames = score.length;
	const intervals: number[] = [];
	for (let tau = (60 / FASTEST) * RATE; tau <= (60 / SLOWEST) * RATE + 1e-9; tau *= TEMPO_STEP) intervals.push(tau);
	const n = intervals.length;
	const band = guide ? guideBand(guide.beats, guide.factor, intervals, frames) : null;
	const within = band ? reachOf(band) : null;
	const stepCost = TEMPO_CHANGE * Math.log(TEMPO_STEP);
	// For each interval the first of its three durations, what each costs, and how likely people tap it.
	const shortest = Int32Array.from(intervals, (tau) => Math.round(tau) - 1);
	const costs = new Float64Array(n * DURATIONS);
	for (let i = 0; i < n; i++) {
		for (let k = 0; k < DURATIONS; k++) costs[i * DURATIONS + k] = JITTER * (shortest[i] + k - intervals[i]) ** 2;
	}
	const prior = Float64Array.from(intervals, (tau) => priorOf(tau / RATE));

	/**
	 * Best walk whose last beat is at frame t with interval i, at i · 2 · RING + t mod RING, and once more RING further:
	 * the three durations then lie side by side whatever t is.
	 */
	const best = new Float64Array(n * 2 * RING).fill(Number.NEGATIVE_INFINITY);
	/** How it came there: duration · (2 · REACH + 1) + change + REACH, or START, or JUMP (see jumps). */
	const came = new Uint8Array(frames * n);
	/** For each frame where a jump comes from: duration · 256 + interval. */
	const jumps = new Uint16Array(frames);
	const arrives = new Float64Array(n);
	const arrivesBy = new Uint8Array(n);
	const reached = new Float64Array(n);
	const origin = new Int32Array(n);
	let top = Number.NEGATIVE_INFINITY;
	let topAt = 0;
	let topInterval = 0;

	for (let t = 0; t < frames; t++) {
		if (onProgress && t % Math.max(1, Math.floor(frames / 50)) === 0) onProgress(t / frames);
		const slot = t % RING;
		const first = within ? within.low[t] : 0;
		const last = within ? within.high[t] : n - 1;
		let peak = first;
		for (let i = first; i <= last; i++) {
			const at = i * 2 * RING + RING + slot - shortest[i];
			const a = best[at] - costs[i * DURATIONS];
			const b = best[at - 1] - costs[i * DURATIONS + 1];
			const c = best[at - 2] - costs[i * DURATIONS + 2];
			const by = a > b ? (a > c ? 0 : 2) : b > c ? 1 : 2;
			arrivesBy[i] = by;
			arrives[i] = by === 0 ? a : by === 1 ? b : c;
			if (arrives[i] > arrives[peak]) peak = i;
		}
		// Two running maxima: origin[i] is the interval that the walk had before.
		let carried = Number.NEGATIVE_INFINITY;
		let from = first;
		for (let i = first; i <= last; i++) {
			carried -= stepCost;
			if (arrives[i] >= carried) {
				carried = arrives[i];
				from = i;
			}
			reached[i] = carried;
			origin[i] = from;
		}
		for (let i = last; i >= first; i--) {
			carried -= stepCost;
			if (reached[i] >= carried) {
				carried = reached[i];
				from = origin[i];
			} else {
				reached[i] = carried;
				origin[i] = from;
			}
		}
		const jump = arrives[peak] - TEMPO_JUMP;
		jumps[t] = arrivesBy[peak] * 256 + peak;
		const low = band ? band.low[t] : 0;
		const high = band ? band.high[t] : n - 1;
		const begin = START_COST - (UNCOVERED * t) / RATE;
		const rest = (UNCOVERED * (frames - t)) / RATE;
		for (let i = first; i <= last; i++) {
			let value = reached[i];
			const away = origin[i] - i + REACH;
			let how = JUMP;
			if (jump > value || away < 0 || away > 2 * REACH) {
				value = jump;
			} else {
				how = arrivesBy[origin[i]] * (2 * REACH + 1) + away;
			}
			if (!(value > begin)) {
				value = begin;
				how = START;
			}
			value = i < low || i > high ? Number.NEGATIVE_INFINITY : value + score[t] + prior[i];
			const at = i * 2 * RING + slot;
			best[at] = value;
			best[at + RING] = value;
			came[t * n + i] = how;
			if (value - rest > top) {
				top = value - rest;
				topAt = t;
				topInterval = i;
			}
		}
	}
	const beats: number[] = [];
	for (let t = topAt, i = topInterval; frames > 0; ) {
		beats.push(t / RATE);
		const how = came[t * n + i];
		if (how === START) break;
		const way = how === JUMP ? jumps[t] >> 8 : Math.floor(how / (2 * REACH + 1));
		i = how === JUMP ? jumps[t] & 255 : i + (how % (2 * REACH + 1)) - REACH;
		t -= shortest[i] + way;
	}
	return Float64Array.from(beats.reverse());
}
