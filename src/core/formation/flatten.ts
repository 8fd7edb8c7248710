import type { Segment } from "./path-data.ts";

/**
 * Curves as polylines that stay within a given distance of them. Béziers are cut into as many equal steps of their
 * parameter as Wang's bound asks for (Wang 1984, from the second differences of the control points); arcs into equal
 * angles by the height of a chord's bow. The length of the polyline falls short of the curve's by the square of that.
 */
export interface Contour {
	/** x y of point after point; a closed contour doesn't repeat its first point. */
	readonly points: Float64Array;
	readonly closed: boolean;
	/** 1 where the direction turns sharply: a slot stands there if there is room. */
	readonly corners: Uint8Array;
}

/** Turns sharper than this are corners that a picture is recognised by. */
const CORNER = (35 * Math.PI) / 180;

/** Most steps of one segment: beyond it the tolerance was meant for another scale. */
const MOST_STEPS = 4096;

/**
 * @param tolerance largest distance between curve and polyline, in the path's own units
 * @returns one contour for every stretch that a moveto starts; a lone moveto gives none
 */
export function flattenSegments(segments: readonly Segment[], tolerance: number): Contour[] {
	const contours: Contour[] = [];
	let points: number[] = [];
	let [x, y, startX, startY] = [0, 0, 0, 0];
	const finish = (closed: boolean): void => {
		const contour = createContour(points, closed);
		if (contour !== null) contours.push(contour);
		points = [];
	};
	for (const segment of segments) {
		if (segment.kind === "move") {
			finish(false);
			[x, y, startX, startY] = [segment.x, segment.y, segment.x, segment.y];
			continue;
		}
		if (segment.kind === "close") {
			finish(true);
			[x, y] = [startX, startY];
			continue;
		}
		if (points.length === 0) points.push(x, y);
		addSegment(points, x, y, segment, tolerance);
		[x, y] = [segment.x, segment.y];
	}
	finish(false);
	return contours;
}

type Drawn = Exclude<Segment, { kind: "move" } | { kind: "close" }>;

function addSegment(points: number[], x: number, y: number, segment: Drawn, tolerance: number): void {
	switch (segment.kind) {
		case "line":
			points.push(segment.x, segment.y);
			return;
		case "quadratic": {
			const { x1, y1 } = segment;
			const second = 2 * Math.hypot(x - 2 * x1 + segment.x, y - 2 * y1 + segment.y);
			const steps = stepsFor(second, tolerance);
			for (let i = 1; i <= steps; i++) {
				const t = i / steps;
				const u = 1 - t;
				points.push(u * u * x + 2 * u * t * x1 + t * t * segment.x, u * u * y + 2 * u * t * y1 + t * t * segment.y);
			}
			return;
		}
		case "cubic": {
			const { x1, y1, x2, y2 } = segment;
			const second =
				6 *
				Math.max(
					Math.hypot(x - 2 * x1 + x2, y - 2 * y1 + y2),
					Math.hypot(x1 - 2 * x2 + segment.x, y1 - 2 * y2 + segment.y),
				);
			const steps = stepsFor(second, tolerance);
			for (let i = 1; i <= steps; i++) {
				const t = i / steps;
				const u = 1 - t;
				const [a, b, c, d] = [u * u * u, 3 * u * u * t, 3 * u * t * t, t * t * t];
				points.push(a * x + b * x1 + c * x2 + d * segment.x, a * y + b * y1 + c * y2 + d * segment.y);
			}
			return;
		}
		case "arc": {
			const arc = centreOfArc(x, y, segment);
			if (arc === null) {
				points.push(segment.x, segment.y);
				return;
			}
			const radius = Math.max(arc.rx, arc.ry);
			const bow = Math.acos(Math.max(-1, 1 - Math.min(2, tolerance / radius)));
			const steps = Math.min(MOST_STEPS, Math.max(1, Math.ceil(Math.abs(arc.span) / (2 * bow))));
			for (let i = 1; i < steps; i++) points.push(...pointOfArc(arc, arc.start + (arc.span * i) / steps));
			points.push(segment.x, segment.y);
		}
	}
}

/** A chord over parameter step h bows by at most h²/8 × the largest second derivative. */
function stepsFor(secondDerivative: number, tolerance: number): number {
	return Math.min(MOST_STEPS, Math.max(1, Math.ceil(Math.sqrt(secondDerivative / (8 * tolerance)))));
}

export interface Arc {
	readonly cx: number;
	readonly cy: number;
	readonly rx: number;
	readonly ry: number;
	/** Radians: turn of the ellipse, parameter at the start, and how far it runs (signed). */
	readonly turn: number;
	readonly start: number;
	readonly span: number;
}

export function pointOfArc(arc: Arc, angle: number): [number, number] {
	const [u, v] = [arc.rx * Math.cos(angle), arc.ry * Math.sin(angle)];
	const [cos, sin] = [Math.cos(arc.turn), Math.sin(arc.turn)];
	return [arc.cx + u * cos - v * sin, arc.cy + u * sin + v * cos];
}

/**
 * Endpoint to centre form (SVG 2, appendix B.2.4), radii that are too small scaled up (B.2.5).
 * @returns null where the arc is a straight line: a radius of zero, or no distance between the ends
 */
export function centreOfArc(x0: number, y0: number, arc: Extract<Segment, { kind: "arc" }>): Arc | null {
	const turn = (arc.rotation * Math.PI) / 180;
	const [cos, sin] = [Math.cos(turn), Math.sin(turn)];
	const [dx, dy] = [(x0 - arc.x) / 2, (y0 - arc.y) / 2];
	const [px, py] = [cos * dx + sin * dy, cos * dy - sin * dx];
	let { rx, ry } = arc;
	if (rx === 0 || ry === 0 || (px === 0 && py === 0)) return null;
	const short = (px / rx) ** 2 + (py / ry) ** 2;
	if (short > 1) {
		rx *= Math.sqrt(short);
		ry *= Math.sqrt(short);
	}
	const below = (rx * py) ** 2 + (ry * px) ** 2;
	const root = Math.sqrt(Math.max(0, ((rx * ry) ** 2 - below) / below)) * (arc.large === arc.sweep ? -1 : 1);
	const [qx, qy] = [(root * rx * py) / ry, (-root * ry * px) / rx];
	const start = Math.atan2((py - qy) / ry, (px - qx) / rx);
	let span = Math.atan2((-py - qy) / ry, (-px - qx) / rx) - start;
	if (arc.sweep && span < 0) span += 2 * Math.PI;
	if (!arc.sweep && span > 0) span -= 2 * Math.PI;
	const [cx, cy] = [cos * qx - sin * qy + (x0 + arc.x) / 2, sin * qx + cos * qy + (y0 + arc.y) / 2];
	return { cx, cy, rx, ry, turn, start, span };
}

/** Points on one place become one; null where fewer than two are left. */
function createContour(raw: readonly number[], closed: boolean): Contour | null {
	const kept: number[] = [];
	for (let i = 0; i < raw.length; i += 2) {
		const last = kept.length - 2;
		if (last >= 0 && kept[last] === raw[i] && kept[last + 1] === raw[i + 1]) continue;
		kept.push(raw[i], raw[i + 1]);
	}
	let ring = closed;
	const end = kept.length - 2;
	if (end > 0 && kept[0] === kept[end] && kept[1] === kept[end + 1]) {
		// Comes back to where it started: closed, whether or not it says so.
		kept.length = end;
		ring = true;
	}
	if (kept.length < 4) return null;
	const points = Float64Array.from(kept);
	return { points, closed: ring && kept.length >= 6, corners: findCorners(points, ring && kept.length >= 6) };
}

function findCorners(points: Float64Array, closed: boolean): Uint8Array {
	const count = points.length / 2;
	const corners = new Uint8Array(count);
	for (let i = 0; i < count; i++) {
		if (!closed && (i === 0 || i === count - 1)) {
			corners[i] = 1;
			continue;
		}
		corners[i] = turnAt(points, i) > CORNER ? 1 : 0;
	}
	return corners;
}

/** Radians by which the direction changes at point i of a polyline taken as closed. */
export function turnAt(points: Float64Array, i: number): number {
	const count = points.length / 2;
	const before = 2 * ((i + count - 1) % count);
	const after = 2 * ((i + 1) % count);
	const [ax, ay] = [points[2 * i] - points[before], points[2 * i + 1] - points[before + 1]];
	const [bx, by] = [points[after] - points[2 * i], points[after + 1] - points[2 * i + 1]];
	return Math.abs(Math.atan2(ax * by - ay * bx, ax * bx + ay * by));
}
