/**
 * Beats and bars together: the most likely walk of a pointer through bars, after Krebs, Böck and Widmer, "An efficient
 * state-space model for joint tempo and meter tracking" (2015).
 *
 * Done otherwise here: inside a beat that model only moves on, so it is solved beat by beat instead of state by state.
 * A beat that falls on frame t came from one that fell d frames earlier, where d lies within a frame and a half of the
 * pointer's interval; between beats the interval changes at a cost that grows with the logarithm of the change, which
 * makes the search over all changes two running maxima (Felzenszwalb and Huttenlocher, "Distance transforms of sampled
 * functions", 2012). The walk may begin and end anywhere, and the metre may change at a bar line, at a price.
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
const TEMPO_JUMP = 22;
/** Intervals that a cheap change may reach; further costs more than a jump (7 · ln 1.02 · 150 = 21). */
const REACH = 7;
/** Cost of a beat that falls a frame off its interval. */
const JITTER = 0.7;
/** Log-odds are held within this. */
const ODDS_LIMIT = 6.4;
/** Added to the log-odds of a beat: one frame in about fifteen is near a beat. */
const BEAT_ODDS = 2.7;
/** Weight of a downbeat's log-odds beside a beat's, and what is added to them: one beat in about four is one. */
const DOWNBEAT_WEIGHT = 0.5;
const DOWNBEAT_ODDS = 1;
/** Most people tap near here (Moelants 2002, McKinney and Moelants 2006); broad, or it loses whole collections. */
const PRIOR_CENTRE = 118;
const PRIOR_OCTAVES = 0.8;
const PRIOR_WEIGHT = 0.3;
/** Cost of leaving one metre for another at a bar line. */
const METRE_CHANGE = 12;
/** Beats in a bar, with what each beat costs in it: common time needs no excuse. */
const METRES: readonly { readonly beats: number; readonly cost: number }[] = [
	{ beats: 4, cost: 0 },
	{ beats: 3, cost: 0.05 },
	{ beats: 6, cost: 0.15 },
	{ beats: 2, cost: 0.35 },
];

/** A walk through the music. Times in seconds, not yet moved onto the sound's own onsets. */
export interface BarWalk {
	readonly beats: Float64Array;
	/** Place of each beat in its bar, from 0. */
	readonly places: Uint8Array;
	/** Beats a bar where each beat lies. */
	readonly metres: Uint8Array;
}

const START = 254;
const JUMP = 255;
const DURATIONS = 3;

/** Log-odds of an activation, held within the limit, plus an offset. */
function logOdds(p: number, offset: number): number {
	const odds = Math.log(Math.max(p, 1e-6) / Math.max(1 - p, 1e-6)) + offset;
	return Math.max(-ODDS_LIMIT, Math.min(ODDS_LIMIT, odds));
}

/** Both curves' log-odds at the pointer's rate, each the mean over three frames (a beat is not a point). */
function scoreFrames(activation: ActivationCurves): { beat: Float64Array; downbeat: Float64Array; frames: number } {
	const frames = Math.max(0, Math.floor(((activation.beat.length - 1) / activation.rate) * RATE) + 1);
	const read = (curve: Float32Array, offset: number): Float64Array => {
		const odds = Float64Array.from({ length: frames }, (_, t) => {
			const at = (t / RATE) * activation.rate;
			const i = Math.min(curve.length - 1, Math.floor(at));
			const next = Math.min(curve.length - 1, i + 1);
			return logOdds(curve[i] + (curve[next] - curve[i]) * (at - i), offset);
		});
		return odds.map((x, t) => odds[Math.max(0, t - 1)] + x + odds[Math.min(frames - 1, t + 1)]);
	};
	return {
		beat: read(activation.beat, BEAT_ODDS),
		downbeat: read(activation.downbeat, DOWNBEAT_ODDS).map((x) => x * DOWNBEAT_WEIGHT),
		frames,
	};
}

/**
 * The most likely walk.
 * @param onProgress called with 0..1 about fifty times
 */
export function walkBars(activation: ActivationCurves, onProgress?: (share: number) => void): BarWalk {
	const score = scoreFrames(activation);
	const { frames } = score;
	const intervals: number[] = [];
	for (let tau = (60 / FASTEST) * RATE; tau <= (60 / SLOWEST) * RATE + 1e-9; tau *= TEMPO_STEP) intervals.push(tau);
	const n = intervals.length;
	const ring = Math.ceil(intervals[n - 1]) + 3;
	const stepCost = TEMPO_CHANGE * Math.log(TEMPO_STEP);
	// For each interval the three durations around it and what each costs.
	const durations = new Int32Array(n * DURATIONS);
	const durationCosts = new Float64Array(n * DURATIONS);
	const prior = new Float64Array(n);
	for (let i = 0; i < n; i++) {
		for (let k = 0; k < DURATIONS; k++) {
			const d = Math.round(intervals[i]) - 1 + k;
			durations[i * DURATIONS + k] = d;
			durationCosts[i * DURATIONS + k] = JITTER * (d - intervals[i]) ** 2;
		}
		const octaves = Math.log2((60 * RATE) / intervals[i] / PRIOR_CENTRE) / PRIOR_OCTAVES;
		prior[i] = -0.5 * PRIOR_WEIGHT * octaves * octaves;
	}
	// Chains: one for each beat of each metre. A chain's beat follows the chain before it; first beats follow last ones.
	const chainMetre: number[] = [];
	const chainPlace: number[] = [];
	const firstChain: number[] = [];
	METRES.forEach(({ beats }, m) => {
		firstChain.push(chainMetre.length);
		for (let place = 0; place < beats; place++) {
			chainMetre.push(m);
			chainPlace.push(place);
		}
	});
	const chains = chainMetre.length;
	const lastChain = METRES.map(({ beats }, m) => firstChain[m] + beats - 1);

	/** best[(c · ring + t mod ring) · n + i]: best walk whose last beat is at frame t, in chain c, with interval i. */
	const best = new Float64Array(chains * ring * n).fill(Number.NEGATIVE_INFINITY);
	/** How it came there: (metre left · 15 + change + REACH) · 3 + duration, or START, or JUMP (see jumps). */
	const came = new Uint8Array(frames * chains * n);
	/** For each frame and chain where a jump comes from: (metre left · 256 + interval) · 4 + duration. */
	const jumps = new Uint16Array(frames * chains);
	const arrive = new Float64Array(n);
	const arriveBy = new Uint8Array(n); // metre left · 3 + duration
	const change = new Int32Array(n);
	let top = Number.NEGATIVE_INFINITY;
	let topAt = 0;
	let topChain = 0;
	let topInterval = 0;

	for (let t = 0; t < frames; t++) {
		if (onProgress && t % Math.max(1, Math.floor(frames / 50)) === 0) onProgress(t / frames);
		const slot = t % ring;
		for (let c = 0; c < chains; c++) {
			const metre = chainMetre[c];
			const isFirst = chainPlace[c] === 0;
			const sources = isFirst ? METRES.length : 1;
			arrive.fill(Number.NEGATIVE_INFINITY);
			for (let s = 0; s < sources; s++) {
				const from = isFirst ? lastChain[s] : c - 1;
				const cost = isFirst && s !== metre ? METRE_CHANGE : 0;
				const base = from * ring;
				for (let i = 0, k = 0; i < n; i++) {
					for (let j = 0; j < DURATIONS; j++, k++) {
						const d = durations[k];
						if (d > t) continue;
						let at = slot - d;
						if (at < 0) at += ring;
						const value = best[(base + at) * n + i] - durationCosts[k] - cost;
						if (value > arrive[i]) {
							arrive[i] = value;
							arriveBy[i] = s * DURATIONS + j;
						}
					}
				}
			}
			let peak = 0;
			for (let i = 1; i < n; i++) if (arrive[i] > arrive[peak]) peak = i;
			const jump = arrive[peak] - TEMPO_JUMP;
			jumps[t * chains + c] = (Math.floor(arriveBy[peak] / DURATIONS) * 256 + peak) * 4 + (arriveBy[peak] % DURATIONS);
			// Two running maxima: change[i] is the interval that the walk had before.
			change[0] = 0;
			const reached = best.subarray((c * ring + slot) * n, (c * ring + slot) * n + n);
			reached.set(arrive);
			for (let i = 1; i < n; i++) {
				change[i] = i;
				const risen = reached[i - 1] - stepCost;
				if (risen > reached[i]) {
					reached[i] = risen;
					change[i] = change[i - 1];
				}
			}
			for (let i = n - 2; i >= 0; i--) {
				const fallen = reached[i + 1] - stepCost;
				if (fallen > reached[i]) {
					reached[i] = fallen;
					change[i] = change[i + 1];
				}
			}
			const gain = score.beat[t] + (isFirst ? score.downbeat[t] : -score.downbeat[t]) - METRES[metre].cost;
			const row = (t * chains + c) * n;
			for (let i = 0; i < n; i++) {
				let value = reached[i];
				const origin = change[i];
				const away = origin - i + REACH;
				let how = JUMP;
				if (jump > value || away < 0 || away > 2 * REACH) {
					value = jump;
				} else {
					const by = arriveBy[origin];
					how = (Math.floor(by / DURATIONS) * (2 * REACH + 1) + away) * DURATIONS + (by % DURATIONS);
				}
				const fresh = prior[i] * 10;
				if (!(value > fresh)) {
					value = fresh;
					how = START;
				}
				value += gain + prior[i];
				reached[i] = value;
				came[row + i] = how;
				if (value > top) {
					top = value;
					topAt = t;
					topChain = c;
					topInterval = i;
				}
			}
		}
	}
	if (!(top > 0)) return { beats: new Float64Array(0), places: new Uint8Array(0), metres: new Uint8Array(0) };

	const beats: number[] = [];
	const places: number[] = [];
	const metres: number[] = [];
	let t = topAt;
	let c = topChain;
	let i = topInterval;
	for (;;) {
		beats.push(t / RATE);
		places.push(chainPlace[c]);
		metres.push(METRES[chainMetre[c]].beats);
		const how = came[(t * chains + c) * n + i];
		if (how === START) break;
		let left: number;
		let duration: number;
		if (how === JUMP) {
			const jump = jumps[t * chains + c];
			duration = jump & 3;
			i = (jump >> 2) & 255;
			left = jump >> 10;
		} else {
			duration = how % DURATIONS;
			const rest = Math.floor(how / DURATIONS);
			i += (rest % (2 * REACH + 1)) - REACH;
			left = Math.floor(rest / (2 * REACH + 1));
		}
		t -= durations[i * DURATIONS + duration];
		c = chainPlace[c] === 0 ? lastChain[left] : c - 1;
	}
	return {
		beats: Float64Array.from(beats.reverse()),
		places: Uint8Array.from(places.reverse()),
		metres: Uint8Array.from(metres.reverse()),
	};
}
