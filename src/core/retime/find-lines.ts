/** From rough runs to exact lines: measure lags along each run, fit, measure again closer, and by phase where it holds. */
import type { Run } from "./coarse-path.ts";
import { createPhaseMeter, measureByFeatures, type PhaseMeter } from "./lag.ts";
import { type FittedLine, fitLines, type Line, median, newOn, oldOn, type Point } from "./line.ts";
import type { Heard } from "./listen.ts";

/** Seconds: runs shorter than this are chance. */
const SHORTEST_RUN = 1.5;
/** Seconds of a window of features, to either side. */
const FEATURE_REACH = 1.2;
/** Seconds a point by features may stray from its line; a stretching tool scatters by up to 8 ms. */
const FEATURE_TOLERANCE = 0.012;
/** Seconds a point by phase may stray. */
const PHASE_TOLERANCE = 0.0015;
/** Samples at the small copy's rate: 0.74 s. */
const PHASE_WINDOW = 8192;
/** A rate is taken as 1 where the drift over the whole stretch stays under this many seconds. */
const DRIFT = 0.0005;
/** Share of points that must agree before phase is believed. */
const PHASE_SHARE = 0.6;

export interface SureLine extends FittedLine {
	/** How the line was measured: phase is good to a fraction of a sample. */
	readonly by: "phase" | "features";
}

/** Every line that the runs support, without doubles, by their place in the new soundtrack. */
export function findLines(
	old: Heard,
	current: Heard,
	runs: readonly Run[],
	onProgress?: (share: number) => void,
): SureLine[] {
	const meter = createPhaseMeter(PHASE_WINDOW);
	const found: SureLine[] = [];
	runs.forEach((run, index) => {
		onProgress?.(index / runs.length);
		const from = run.newTimes[0];
		const to = run.newTimes[run.newTimes.length - 1];
		if (to - from < SHORTEST_RUN) return;
		for (const line of byFeatures(old, current, run)) {
			const sure = byPhase(old, current, line, meter) ?? { ...line, by: "features" as const };
			found.push(snapRate(sure));
		}
	});
	return withoutDoubles(found);
}

function byFeatures(old: Heard, current: Heard, run: Run): FittedLine[] {
	const from = run.newTimes[0];
	const to = run.newTimes[run.newTimes.length - 1];
	const length = to - from;
	// The path's own bends say the rate only roughly: fit it, as points, with the tolerance of its frames.
	const rough: Point[] = [];
	const every = Math.max(1, Math.floor(run.newTimes.length / 400));
	for (let i = 0; i < run.newTimes.length; i += every) {
		rough.push({ new: run.newTimes[i], old: run.oldTimes[i], quality: 1 });
	}
	const lines = fitLines(rough, 0.11, 3);
	const spacing = length > 60 ? 1.5 : length > 12 ? 0.5 : Math.max(0.1, length / 16);
	const reach = Math.min(FEATURE_REACH, Math.max(0.4, length / 3));
	const measured: Point[] = [];
	const margin = Math.min(reach / 2, length / 8);
	for (let time = from + margin; time <= to - margin; time += spacing) {
		const guess = nearestLine(lines, time) ?? lineThrough(run, time);
		const point = measureByFeatures(old.fine, current.fine, guess, time, reach, 0.15, 2);
		if (point !== null) measured.push(point);
	}
	const least = Math.min(4, Math.max(3, Math.floor(measured.length / 2)));
	const first = fitLines(measured, 2 * FEATURE_TOLERANCE, least);
	// Closer, with the rate just found: under another tempo the first measure was smeared.
	const again: Point[] = [];
	for (const line of first) {
		for (const point of measured) {
			if (point.new < line.from - 1e-9 || point.new > line.to + 1e-9) continue;
			const closer = measureByFeatures(old.fine, current.fine, line, point.new, reach, 0.06);
			if (closer !== null) again.push(closer);
		}
	}
	return fitLines(again, FEATURE_TOLERANCE, least);
}

function nearestLine(lines: readonly FittedLine[], time: number): FittedLine | null {
	for (const line of lines) if (time >= line.from && time <= line.to) return line;
	return null;
}

/** A line of rate 1 through the path at a time. */
function lineThrough(run: Run, time: number): Line {
	let i = 0;
	while (i + 1 < run.newTimes.length && run.newTimes[i + 1] <= time) i++;
	return { rate: 1, at: run.oldTimes[i] - run.newTimes[i] };
}

/** The same line by phase, or null where the waveforms don't agree along it (a tempo changed with the pitch kept). */
function byPhase(old: Heard, current: Heard, line: FittedLine, meter: PhaseMeter): SureLine | null {
	// Near rate 1 the samples may be the same although features gave a rate a hair off.
	const drift = Math.abs(line.rate - 1) * (line.to - line.from);
	const middle = (line.from + line.to) / 2;
	const guesses: Line[] =
		drift < 0.02 || Math.abs(line.rate - 1) < 2e-4 ? [{ rate: 1, at: oldOn(line, middle) - middle }, line] : [line];
	for (const guess of guesses) {
		const length = line.to - line.from;
		const spacing = Math.max(0.2, Math.min(2, length / 8));
		const points: Point[] = [];
		for (let time = line.from; time <= line.to + 1e-9; time += spacing) {
			const point = meter.measure(old.work, current.work, guess, time, 0.03);
			if (point !== null) points.push(point);
		}
		if (points.length < 3) continue;
		const fitted = fitLines(points, PHASE_TOLERANCE, Math.max(3, Math.floor(PHASE_SHARE * points.length)));
		if (fitted.length === 0) continue;
		const best = fitted.reduce((a, b) => (b.inliers > a.inliers ? b : a));
		if (best.inliers < PHASE_SHARE * points.length) continue;
		const on = points.filter((point) => Math.abs(point.old - oldOn(best, point.new)) <= PHASE_TOLERANCE);
		const settled =
			Math.abs(best.rate - 1) * (best.to - best.from) < DRIFT
				? { rate: 1, at: median(on.map((point) => point.old - point.new)) }
				: { rate: best.rate, at: best.at };
		return { ...line, ...settled, inliers: best.inliers, points: points.length, by: "phase" };
	}
	return null;
}

/** A rate by features that is 1 as far as can be told is 1. */
function snapRate(line: SureLine): SureLine {
	if (line.by === "phase" || Math.abs(line.rate - 1) * (line.to - line.from) > 0.006) return line;
	const middle = (line.from + line.to) / 2;
	return { ...line, rate: 1, at: oldOn(line, middle) - middle };
}

/** Lines that say the same where they are heard are one: the one that more points lie on, over the ground of both. */
function withoutDoubles(lines: readonly SureLine[]): SureLine[] {
	const kept: SureLine[] = [];
	for (const line of [...lines].sort((a, b) => b.inliers - a.inliers)) {
		const twin = kept.findIndex((other) => {
			const tolerance = line.by === "phase" && other.by === "phase" ? 0.0005 : 0.01;
			return [line.from, line.to].every((time) => Math.abs(oldOn(line, time) - oldOn(other, time)) <= tolerance);
		});
		if (twin < 0) kept.push(line);
		else {
			const other = kept[twin];
			kept[twin] = { ...other, from: Math.min(other.from, line.from), to: Math.max(other.to, line.to) };
		}
	}
	return kept.sort((a, b) => a.from - b.from || newOn(a, 0) - newOn(b, 0));
}
