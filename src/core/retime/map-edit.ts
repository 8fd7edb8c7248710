/**
 * Two soundtracks in, edit map out: features, a rough path, exact lines, the path over them, joints. Methods in the files
 * that do them; this one holds their order and what is believed of them.
 */
import type { Samples } from "../decode/index.ts";
import { assembleMap, type Piece } from "./assemble-map.ts";
import { findRuns } from "./coarse-path.ts";
import { likelihoodOf } from "./confidence.ts";
import type { AnchorPair, EditMap, Joint } from "./edit-map.ts";
import { findLines, type SureLine } from "./find-lines.ts";
import { type JointEvidence, type KnownLine, placeJoint } from "./joints.ts";
import { oldOn } from "./line.ts";
import { findSegments, type LineCosts, lineCosts, type Segment, segmentOf } from "./line-path.ts";
import { FINE_RATE, type Heard, listen, SOFT } from "./listen.ts";
import {
	createMonoReader,
	type MonoReader,
	sameFrames,
	sameOffset,
	sameShare,
	sameSoundtrack,
} from "./same-samples.ts";

/** Seconds: stretches shorter than this are chance, and than that even where their samples are the same. */
const SHORTEST = 1.5;
const SHORTEST_SAME = 0.7;
/** Seconds in which something must be heard where the samples are the same: silence is the same everywhere. */
const LEAST_HEARD = 0.3;
/**
 * Evidence that a stretch needs to stand alone, and beside others: at rate 1 by phase, or at a rate that another stretch
 * with much evidence has too (an edit is stretched as a whole). Between pieces of different music the strongest chance
 * stretch of some twelve hundred had 1.4.
 */
const ALONE = 2;
const BESIDE = 1;
const MUCH = 6;
const SAME_RATE = 0.003;
/** Seconds of other sound on a line that goes on as before: something laid over the music, not an edit. */
const LAID_OVER = 2;
/** Seconds, and share of the shorter soundtrack, that must be found again, or it is another piece altogether. */
const LEAST_FOUND = 8;
const LEAST_SHARE = 0.08;

export interface MapOptions {
	/** Share done, 0..1, and what is being done. */
	readonly onProgress?: (share: number, stage: string) => void;
	/** Pairs that the designer sets: the map goes through them. */
	readonly anchors?: readonly AnchorPair[];
	/** Old seconds of beats and of bars' first beats: where the evidence leaves a choice, a joint is put on one. */
	readonly beats?: readonly number[];
	readonly downbeats?: readonly number[];
}

/**
 * Finds which stretch of the old soundtrack became which stretch of the new one.
 * @returns an edit map; where the new soundtrack is another piece its verdict is "different" and nothing is carried
 */
export function mapEdit(old: Samples, current: Samples, options: MapOptions = {}): EditMap {
	let reached = 0;
	const progress = (share: number, stage: string): void => {
		reached = Math.max(reached, share);
		options.onProgress?.(reached, stage);
	};
	const anchors = options.anchors ?? [];
	const oldDuration = (old.channels[0]?.length ?? 0) / old.sampleRate;
	const newDuration = (current.channels[0]?.length ?? 0) / current.sampleRate;
	const durations = { oldDuration, newDuration };
	progress(0, "comparing samples");
	if (anchors.length === 0 && oldDuration > 0 && sameSoundtrack(old, current)) {
		const whole: Piece = { newFrom: 0, newTo: newDuration, line: { at: 0, rate: 1 }, confidence: 1, exact: true };
		return assembleMap(durations, "same", [whole], [], []);
	}
	const heardOld = listen(old, (share) => progress(0.02 + 0.28 * share, "listening to the old soundtrack"));
	const heard = listen(current, (share) => progress(0.3 + 0.28 * share, "listening to the new soundtrack"));
	if (heardOld.silent || heard.silent) {
		const which = heardOld.silent ? "old" : "new";
		return assembleMap(durations, "different", [], [], [`The ${which} soundtrack is silent, so nothing can be found.`]);
	}
	const runs = findRuns(heardOld.coarse, heard.coarse, anchors, (share) =>
		progress(0.58 + 0.27 * share, "finding what went where"),
	);
	const lines = withAnchors(
		findLines(heardOld, heard, runs, (share) => progress(0.85 + 0.1 * share, "measuring offsets")),
		anchors,
	);
	progress(0.95, "placing joints");
	const readers = { old: createMonoReader(old), current: createMonoReader(current) };
	const found = lines.map((line) => knownLine(line, old, current, readers));
	const known = [...found, ...plainLines(found, durations, old, current, readers)];
	const believed = believe(heardOld, heard, known, anchors, readers);
	const evidence: JointEvidence = {
		lines: believed.lines,
		costs: believed.costs,
		...readers,
		oldLevels: heardOld.levels,
		newLevels: heard.levels,
		sampleRate: current.sampleRate,
		beats: options.beats ?? [],
		downbeats: options.downbeats ?? [],
	};
	const { pieces, joints } = toPieces(evidence, believed.segments, heardOld, heard, durations);
	progress(1, "done");
	const carried = pieces.reduce((sum, piece) => sum + piece.newTo - piece.newFrom, 0);
	const shorter = Math.min(oldDuration, newDuration);
	if (anchors.length === 0 && carried < Math.min(0.5 * shorter, Math.max(LEAST_FOUND, LEAST_SHARE * shorter))) {
		return assembleMap(
			durations,
			"different",
			[],
			[],
			["Next to nothing of the old soundtrack is in the new one: this is another piece, so nothing was moved."],
		);
	}
	return assembleMap(durations, "edited", pieces, joints, []);
}

/** Where a set pair lies on no line found, one goes through it, at the rate of the nearest line. */
function withAnchors(lines: readonly SureLine[], anchors: readonly AnchorPair[]): SureLine[] {
	const all = [...lines];
	for (const anchor of anchors) {
		if (lines.some((line) => Math.abs(oldOn(line, anchor.new) - anchor.old) <= 0.12)) continue;
		let nearest: SureLine | null = null;
		for (const line of lines) {
			const off = (one: SureLine): number => Math.abs(oldOn(one, anchor.new) - anchor.old);
			if (nearest === null || off(line) < off(nearest)) nearest = line;
		}
		const rate = nearest?.rate ?? 1;
		all.push({
			rate,
			at: anchor.old - rate * anchor.new,
			from: anchor.new,
			to: anchor.new,
			inliers: 1,
			points: 1,
			by: "features",
		});
	}
	return all;
}

interface Readers {
	readonly old: MonoReader;
	readonly current: MonoReader;
}

/**
 * Most edits keep the start, the end or both. Where music repeats itself to the sample the path may have gone by another
 * place that is just as alike; these two lines let it go by the plain one.
 */
function plainLines(
	found: readonly KnownLine[],
	{ oldDuration, newDuration }: { readonly oldDuration: number; readonly newDuration: number },
	old: Samples,
	current: Samples,
	readers: Readers,
): KnownLine[] {
	const plain: KnownLine[] = [];
	for (const at of new Set([0, oldDuration - newDuration])) {
		const from = Math.max(0, -at);
		const to = Math.min(newDuration, oldDuration - at);
		const whole = { at, rate: 1, from, to, inliers: 1, points: 1, by: "phase" as const };
		const line = to > from ? knownLine(whole, old, current, readers) : null;
		if (line === null || line.offset === null) continue;
		if (found.every((other) => other.offset !== line.offset)) plain.push(line);
	}
	return plain;
}

function knownLine(line: SureLine, old: Samples, current: Samples, readers: Readers): KnownLine {
	const { sampleRate } = current;
	if (old.sampleRate !== sampleRate || line.by !== "phase") return { ...line, offset: null };
	const offset = sameOffset(
		readers.old,
		readers.current,
		line,
		sampleRate,
		Math.round(line.from * sampleRate),
		Math.round(line.to * sampleRate),
	);
	return offset === null ? { ...line, offset } : { ...line, offset, at: offset / sampleRate, rate: 1 };
}

interface Believed {
	readonly lines: readonly KnownLine[];
	readonly costs: LineCosts;
	readonly segments: readonly Segment[];
}

/** The path over the lines; lines whose every segment is weak are struck off and the path found again. */
function believe(
	old: Heard,
	current: Heard,
	known: readonly KnownLine[],
	anchors: readonly AnchorPair[],
	readers: Readers,
): Believed {
	let lines = known;
	for (;;) {
		const costs = lineCosts(old.fine, current.fine, current.levels, lines);
		lines.forEach((line, k) => {
			if (line.offset !== null) believeSamples(costs, k, line.offset, readers, current.samples.sampleRate);
		});
		const segments = toEnds(costs, bridge(costs, findSegments(costs, lines, anchors)));
		const firm = segments.filter((segment) => segment.line >= 0 && segment.evidence >= MUCH);
		const rates = firm.map((segment) => lines[segment.line].rate);
		const holds = (segment: Segment): boolean =>
			segment.line >= 0 && (isStrong(segment, lines[segment.line], rates) || holdsAnchor(segment, anchors));
		const strong = lines.filter((_, k) => segments.some((segment) => segment.line === k && holds(segment)));
		if (strong.length === lines.length) {
			// A weak segment of a line that is strong elsewhere is chance all the same.
			const kept = segments.map((segment) => (holds(segment) ? segment : { ...segment, line: -1 }));
			return { lines, costs, segments: toEnds(costs, bridge(costs, kept)) };
		}
		lines = strong;
	}
}

/** Frames whose samples are the same cost nothing: features of 10 ms are a little less alike where frames don't fall together. */
function believeSamples(costs: LineCosts, line: number, offset: number, readers: Readers, sampleRate: number): void {
	const centres = Int32Array.from({ length: costs.frames }, (_, f) => Math.round((f * sampleRate) / FINE_RATE));
	const same = sameFrames(readers.old, readers.current, offset, centres, Math.round((0.4 * sampleRate) / FINE_RATE));
	for (let f = 0; f < costs.frames; f++) if (same[f] === 1) costs.values[line * costs.frames + f] = 0;
}

function isStrong(segment: Segment, line: KnownLine, rates: readonly number[]): boolean {
	const seconds = (segment.to - segment.from) / FINE_RATE;
	if (line.offset !== null) return seconds >= SHORTEST_SAME && segment.heard >= LEAST_HEARD;
	const beside =
		(line.by === "phase" && line.rate === 1) || rates.some((rate) => Math.abs(rate - line.rate) <= SAME_RATE);
	return seconds >= SHORTEST && segment.evidence >= (beside ? BESIDE : ALONE);
}

function holdsAnchor(segment: Segment, anchors: readonly AnchorPair[]): boolean {
	return anchors.some(
		(anchor) => anchor.new * FINE_RATE >= segment.from - 5 && anchor.new * FINE_RATE <= segment.to + 5,
	);
}

/** Joins neighbours on one line, also over a short stretch of other sound between them. */
function bridge(costs: LineCosts, segments: readonly Segment[]): Segment[] {
	const joined: Segment[] = [];
	for (const segment of segments) {
		const last = joined[joined.length - 1];
		const beforeLast = joined[joined.length - 2];
		if (last !== undefined && last.line === segment.line) {
			joined[joined.length - 1] = segmentOf(costs, last.line, last.from, segment.to);
		} else if (
			last?.line === -1 &&
			segment.line >= 0 &&
			beforeLast?.line === segment.line &&
			(last.to - last.from) / FINE_RATE <= LAID_OVER
		) {
			joined.length -= 2;
			joined.push(segmentOf(costs, segment.line, beforeLast.from, segment.to));
		} else joined.push(segment);
	}
	return joined;
}

/** A short soft start or end (a fade, a reverberation cut off) belongs to the stretch beside it, if its line reaches there. */
function toEnds(costs: LineCosts, segments: readonly Segment[]): Segment[] {
	const out = [...segments];
	const belongs = (segment: Segment | undefined, line: number | undefined): boolean => {
		if (segment?.line !== -1 || line === undefined || line < 0) return false;
		if ((segment.to - segment.from) / FINE_RATE > LAID_OVER) return false;
		let level = 0;
		for (let f = segment.from; f < segment.to; f++) {
			if (!Number.isFinite(costs.values[line * costs.frames + f])) return false;
			level += costs.levels[f] / (segment.to - segment.from);
		}
		return level < SOFT;
	};
	const [first, second] = out;
	if (belongs(first, second?.line)) out.splice(0, 2, segmentOf(costs, second.line, first.from, second.to));
	const last = out[out.length - 1];
	const beforeLast = out[out.length - 2];
	if (belongs(last, beforeLast?.line)) {
		out.splice(out.length - 2, 2, segmentOf(costs, beforeLast.line, beforeLast.from, last.to));
	}
	return out;
}

function toPieces(
	evidence: JointEvidence,
	segments: readonly Segment[],
	old: Heard,
	current: Heard,
	durations: { oldDuration: number; newDuration: number },
): { pieces: Piece[]; joints: Joint[] } {
	const { lines } = evidence;
	const joints: Joint[] = [];
	for (let i = 1; i < segments.length; i++) joints.push(placeJoint(evidence, segments[i - 1], segments[i]));
	const pieces: Piece[] = [];
	segments.forEach((segment, i) => {
		if (segment.line < 0) return;
		const line = lines[segment.line];
		// A line can't be heard before the old soundtrack's start or past its end.
		const first = Math.max(i === 0 ? 0 : joints[i - 1].at, (0 - line.at) / line.rate);
		const last = Math.min(
			i === segments.length - 1 ? durations.newDuration : joints[i].at,
			(durations.oldDuration - line.at) / line.rate,
		);
		if (!(last > first)) return;
		const exact =
			line.offset !== null &&
			sameShare(
				evidence.old,
				evidence.current,
				line.offset,
				Math.round(first * evidence.sampleRate),
				Math.round(last * evidence.sampleRate),
			) > 0.5;
		const { confidence } = likelihoodOf(old.coarse, current.coarse, line, first, last, exact);
		pieces.push({ newFrom: first, newTo: last, line: { at: line.at, rate: line.rate }, confidence, exact });
	});
	return { pieces, joints };
}
