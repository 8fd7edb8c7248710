/**
 * Where exactly one segment ends and the next begins. Where the samples are the same they say it themselves; else the
 * costs of both lines do, to a frame or two, and among places that cost nearly the same a beat is taken: music is cut on
 * beats.
 */
import { NOT_IN_OLD } from "./coarse-path.ts";
import type { Joint } from "./edit-map.ts";
import type { SureLine } from "./find-lines.ts";
import { newOn, oldOn } from "./line.ts";
import type { LineCosts, Segment } from "./line-path.ts";
import { FINE_RATE, QUIET } from "./listen.ts";
import { type MonoReader, sameUntil } from "./same-samples.ts";

/** A line and, where the samples are the same along it, by how many samples old runs ahead of new. */
export interface KnownLine extends SureLine {
	readonly offset: number | null;
}

/** What joints are found from. */
export interface JointEvidence {
	readonly lines: readonly KnownLine[];
	readonly costs: LineCosts;
	readonly old: MonoReader;
	readonly current: MonoReader;
	/** One a fine frame, as `Heard` has them. */
	readonly oldLevels: Float32Array;
	readonly newLevels: Float32Array;
	/** Hz of both where an offset is known. */
	readonly sampleRate: number;
	/** Old seconds, rising; may be empty. */
	readonly beats: readonly number[];
	readonly downbeats: readonly number[];
}

/** Seconds from the rough joint at which the samples are looked at first, and how far further in. */
const INSIDE = 0.15;
const FURTHEST_INSIDE = 1.8;
/** Seconds: a cross-fade between two same stretches longer than this is not taken for one. */
const LONGEST_FADE = 2.5;
/** Seconds by which samples may stop being the same before the rough joint with new music. */
const EARLIER = 0.4;
/** Seconds: a fade between two places of the same music is no longer than this. */
const LONGEST_BLIP = 0.1;
/** Seconds by which quiet samples may shift the middle of a fade from the joint. */
const OFF_MIDDLE = 0.0015;
/** Seconds a fade may hide of a joint with new music. */
const HIDDEN = 0.02;
/** Seconds over which an ambiguous joint is followed. */
const FOLLOWED = 40;
/** Seconds of range from which on a joint is called ambiguous. */
const AMBIGUOUS = 0.5;
/** Extra costs within which two places of a joint cost the same, and nearly the same. */
const SAME_COST = 0.12;
const NEAR_COST = 0.35;

/** @param frame the rough joint: the first frame of `after` */
export function placeJoint(evidence: JointEvidence, before: Segment, after: Segment): Joint {
	const { lines, sampleRate } = evidence;
	const rough = (after.from - 0.5) / FINE_RATE;
	const left = before.line >= 0 ? lines[before.line] : null;
	const right = after.line >= 0 ? lines[after.line] : null;
	// A joint lies between its two segments' other ends, wherever the samples go on being the same.
	const earliest = (before.from + 1) / FINE_RATE;
	const latest = (after.to - 1) / FINE_RATE;
	const end = left === null ? null : lastSame(evidence, left, before, rough, latest);
	const start = right === null ? null : firstSame(evidence, right, after, rough, earliest);
	if (end !== null && start !== null) {
		if (start <= end) {
			const fade = fadeWithin(evidence, left as KnownLine, right as KnownLine, start, end);
			if (fade !== null) return fade;
			// Both are the same samples here: every place between is right, so a beat it is.
			const at = onBeat(evidence, left, right, start, end, rough) ?? Math.min(end, Math.max(start, rough));
			return { at, spread: 0, ambiguous: end - start >= AMBIGUOUS ? [start, end] : null };
		}
		if (start - end <= LONGEST_FADE) {
			// A fade between them: its middle is the joint, to the sample.
			const middle = (start + end) / 2;
			const beat = onBeat(evidence, null, right, middle - OFF_MIDDLE, middle + OFF_MIDDLE, middle) ?? middle;
			const at = Math.round(beat * sampleRate) / sampleRate;
			return { at, spread: (start - end) / 2, ambiguous: null };
		}
	}
	// Samples that go on being the same past the rough joint are believed however far; other sound isn't by chance.
	if (end !== null && start === null && end > rough - EARLIER) {
		return { at: onBeat(evidence, left, null, end, end + HIDDEN, end) ?? end, spread: HIDDEN, ambiguous: null };
	}
	if (start !== null && end === null && start < rough + EARLIER) {
		return {
			at: onBeat(evidence, null, right, start - HIDDEN, start, start) ?? start,
			spread: HIDDEN,
			ambiguous: null,
		};
	}
	const joint = byCost(evidence, before, after, left, right);
	if (left === null && right !== null) return throughQuiet(evidence, right, joint, -1);
	if (right === null && left !== null) return throughQuiet(evidence, left, joint, 1);
	return joint;
}

/**
 * Where both lines are the same music for a while, the editor's fade still tells: at the joint neither line's samples
 * are. Looked for where the left line breaks off and where the right one begins.
 */
function fadeWithin(
	evidence: JointEvidence,
	left: KnownLine,
	right: KnownLine,
	start: number,
	end: number,
): Joint | null {
	const { old, current, sampleRate } = evidence;
	const beyond = Math.round(LONGEST_BLIP * sampleRate);
	const joint = (from: number, to: number): Joint => ({
		at: Math.round((from + to) / 2) / sampleRate,
		spread: (to - from) / 2 / sampleRate,
		ambiguous: null,
	});
	const last = Math.round(end * sampleRate);
	const back = sameUntil(old, current, right.offset as number, last + beyond, -1, 2 * beyond);
	if (back > last && back < last + beyond) return joint(last, back);
	const first = Math.round(start * sampleRate);
	const on = sameUntil(old, current, left.offset as number, first - beyond, 1, 2 * beyond) + 1;
	if (on < first && on > first - beyond) return joint(on, first);
	return null;
}

/** A pause beside new music belongs to the stretch as long as it is a pause in both soundtracks. */
function throughQuiet(evidence: JointEvidence, line: KnownLine, joint: Joint, step: 1 | -1): Joint {
	const { oldLevels, newLevels } = evidence;
	let frame = Math.round(joint.at * FINE_RATE);
	const first = frame;
	for (;;) {
		const next = frame + step;
		const old = Math.round(oldOn(line, next / FINE_RATE) * FINE_RATE);
		if (next < 0 || next >= newLevels.length || old < 0 || old >= oldLevels.length) break;
		if (newLevels[next] >= QUIET || oldLevels[old] >= QUIET) break;
		frame = next;
	}
	return frame === first ? joint : { ...joint, at: frame / FINE_RATE };
}

/** New second after the last same sample of the left line, or null where its samples aren't the same. */
function lastSame(
	evidence: JointEvidence,
	line: KnownLine,
	segment: Segment,
	rough: number,
	latest: number,
): number | null {
	if (line.offset === null) return null;
	const { old, current, sampleRate } = evidence;
	const most = Math.round((FOLLOWED + FURTHEST_INSIDE) * sampleRate);
	for (let inside = INSIDE; inside <= FURTHEST_INSIDE; inside += INSIDE) {
		const from = Math.round((rough - inside) * sampleRate);
		if (from < (segment.from / FINE_RATE) * sampleRate) break;
		const last = sameUntil(old, current, line.offset, from, 1, most);
		if (last - from > 0.01 * sampleRate) return Math.min((last + 1) / sampleRate, latest);
	}
	return null;
}

/** New second of the first same sample of the right line, or null. */
function firstSame(
	evidence: JointEvidence,
	line: KnownLine,
	segment: Segment,
	rough: number,
	earliest: number,
): number | null {
	if (line.offset === null) return null;
	const { old, current, sampleRate } = evidence;
	const most = Math.round((FOLLOWED + FURTHEST_INSIDE) * sampleRate);
	for (let inside = INSIDE; inside <= FURTHEST_INSIDE; inside += INSIDE) {
		const from = Math.round((rough + inside) * sampleRate);
		if (from > (segment.to / FINE_RATE) * sampleRate) break;
		const first = sameUntil(old, current, line.offset, from, -1, most);
		if (from - first > 0.01 * sampleRate) return Math.max(first / sampleRate, earliest);
	}
	return null;
}

/** The joint from both lines' costs, frame by frame, around the path's own. */
function byCost(
	evidence: JointEvidence,
	before: Segment,
	after: Segment,
	left: KnownLine | null,
	right: KnownLine | null,
): Joint {
	const { costs } = evidence;
	const costOf = (line: number, frame: number): number =>
		line < 0 ? (NOT_IN_OLD * 10) / FINE_RATE : costs.values[line * costs.frames + frame];
	/** Cost of giving frames to the left line that the path gave to the right one (forwards), or the other way. */
	const reach = (step: 1 | -1, limit: number): number => {
		let frame = after.from;
		let extra = 0;
		let furthest = after.from;
		const most = Math.round(FOLLOWED * FINE_RATE);
		for (let n = 0; n < most; n++) {
			const at = step > 0 ? frame : frame - 1;
			if (at < before.from || at >= after.to) break;
			const toLeft = costOf(before.line, at) - costOf(after.line, at);
			extra += step > 0 ? toLeft : -toLeft;
			if (!(extra <= NEAR_COST)) break;
			frame += step;
			if (extra <= limit) furthest = frame;
		}
		return furthest;
	};
	const time = (frame: number): number => (frame - 0.5) / FINE_RATE;
	const from = time(reach(-1, SAME_COST));
	const to = time(reach(1, SAME_COST));
	const rough = time(after.from);
	const at = onBeat(evidence, left, right, from - 0.01, to + 0.01, rough) ?? rough;
	const widest: [number, number] = [time(reach(-1, NEAR_COST)), time(reach(1, NEAR_COST))];
	const bothHeard = left !== null && right !== null;
	return {
		at,
		spread: Math.max(0.015, at - from, to - at),
		ambiguous: bothHeard && widest[1] - widest[0] >= AMBIGUOUS ? widest : null,
	};
}

/** The downbeat, else the beat, of either line between two new times that lies nearest to `near`; null without one. */
function onBeat(
	evidence: JointEvidence,
	left: KnownLine | null,
	right: KnownLine | null,
	from: number,
	to: number,
	near: number,
): number | null {
	for (const beats of [evidence.downbeats, evidence.beats]) {
		let best: number | null = null;
		for (const line of [right, left]) {
			if (line === null) continue;
			for (const beat of beats) {
				const at = newOn(line, beat);
				if (at < from || at > to) continue;
				if (best === null || Math.abs(at - near) < Math.abs(best - near) - 1e-3) best = at;
			}
		}
		if (best !== null) return best;
	}
	return null;
}
