/**
 * Lines: old = at + rate × new, both in seconds. What stays of a soundtrack in a new edit lies on a few of them, and
 * robust fitting (consensus of pairs: Fischler and Bolles 1981, made exhaustive and so without chance) finds them among
 * measured points, wrong ones included.
 */

export interface Line {
	/** Old second of new second 0. */
	readonly at: number;
	/** Old seconds a new second. */
	readonly rate: number;
}

/** One measured correspondence. */
export interface Point {
	/** Seconds. */
	readonly new: number;
	readonly old: number;
	/** How alike the two places are, 0..1. */
	readonly quality: number;
}

export interface FittedLine extends Line {
	/** New seconds of the first and last point that lie on it. */
	readonly from: number;
	readonly to: number;
	/** Points on the line, and points within from … to. */
	readonly inliers: number;
	readonly points: number;
}

export const oldOn = (line: Line, time: number): number => line.at + line.rate * time;

/** The old second's place in the new soundtrack. */
export const newOn = (line: Line, old: number): number => (old - line.at) / line.rate;

/**
 * Lines through points that lie in the order of the new soundtrack, best first peeled off and the rest looked at again.
 * @param tolerance seconds a point on a line may stray
 * @param least points that a line must have
 */
export function fitLines(points: readonly Point[], tolerance: number, least: number): FittedLine[] {
	const found: FittedLine[] = [];
	const open: (readonly Point[])[] = [points];
	while (open.length > 0) {
		const part = open.pop() as readonly Point[];
		const line = part.length >= Math.max(2, least) ? fitOne(part, tolerance, least) : null;
		if (line === null) continue;
		found.push(line);
		open.push(
			part.filter((point) => point.new < line.from),
			part.filter((point) => point.new > line.to),
		);
	}
	return found.sort((a, b) => a.from - b.from);
}

/** The line that most neighbouring points lie on, fitted to them by least squares; null where none has enough. */
function fitOne(points: readonly Point[], tolerance: number, least: number): FittedLine | null {
	let best: { from: number; to: number; score: number; line: Line } | null = null;
	const count = points.length;
	// Pairs at three distances: long ones give the slope, short ones find short lines.
	const gaps = new Set([
		Math.max(1, count >> 1),
		Math.max(1, count >> 2),
		Math.min(count - 1, 8),
		Math.min(count - 1, 3),
	]);
	for (const gap of gaps) {
		const step = Math.max(1, Math.floor((count - gap) / 60));
		for (let i = 0; i + gap < count; i += step) {
			const line = through(points[i], points[i + gap]);
			if (line === null) continue;
			const stretch = bestStretch(points, line, tolerance);
			if (best === null || stretch.score > best.score) best = { ...stretch, line };
		}
	}
	if (best === null || best.score < least) return null;
	let line = best.line;
	let { from, to } = best;
	for (let round = 0; round < 4; round++) {
		const on = points.slice(from, to + 1).filter((point) => Math.abs(point.old - oldOn(line, point.new)) <= tolerance);
		const fitted = leastSquares(on);
		if (fitted === null) break;
		line = fitted;
		({ from, to } = bestStretch(points, line, tolerance));
	}
	const within = points.slice(from, to + 1);
	const inliers = within.filter((point) => Math.abs(point.old - oldOn(line, point.new)) <= tolerance).length;
	if (inliers < least) return null;
	return { ...line, from: points[from].new, to: points[to].new, inliers, points: within.length };
}

function through(a: Point, b: Point): Line | null {
	const span = b.new - a.new;
	if (!(span > 0)) return null;
	const rate = (b.old - a.old) / span;
	return rate > 0.5 && rate < 2 ? { rate, at: a.old - rate * a.new } : null;
}

/** The run of points with the most on the line, each one off it costing one (Kadane's largest sum). */
function bestStretch(
	points: readonly Point[],
	line: Line,
	tolerance: number,
): { from: number; to: number; score: number } {
	let best = { from: 0, to: 0, score: 0 };
	let sum = 0;
	let from = 0;
	for (let i = 0; i < points.length; i++) {
		const off = Math.abs(points[i].old - oldOn(line, points[i].new)) / tolerance;
		// Nearly hit counts nearly nothing, so that of two lines the closer one wins.
		const gain = off <= 1 ? 1 - 0.5 * off * off : -1;
		if (sum <= 0) {
			sum = 0;
			from = i;
		}
		sum += gain;
		if (sum > best.score) best = { from, to: i, score: sum };
	}
	return best;
}

/** Weighted by quality; null with fewer than two different new times. */
function leastSquares(points: readonly Point[]): Line | null {
	let weight = 0;
	let meanNew = 0;
	let meanOld = 0;
	for (const point of points) {
		weight += point.quality;
		meanNew += point.quality * point.new;
		meanOld += point.quality * point.old;
	}
	if (!(weight > 0)) return null;
	meanNew /= weight;
	meanOld /= weight;
	let spread = 0;
	let both = 0;
	for (const point of points) {
		spread += point.quality * (point.new - meanNew) ** 2;
		both += point.quality * (point.new - meanNew) * (point.old - meanOld);
	}
	if (!(spread > 0)) return null;
	const rate = both / spread;
	return { rate, at: meanOld - rate * meanNew };
}

/** Middle value; NaN of nothing. */
export function median(values: readonly number[]): number {
	const sorted = Float64Array.from(values).sort();
	const middle = sorted.length >> 1;
	if (sorted.length === 0) return Number.NaN;
	return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}
