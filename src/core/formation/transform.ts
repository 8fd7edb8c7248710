import { centreOfArc, pointOfArc } from "./flatten.ts";
import type { Segment } from "./path-data.ts";

/** x' = a·x + c·y + e, y' = b·x + d·y + f, as SVG writes matrix(a b c d e f). */
export type Transform = readonly [number, number, number, number, number, number];

export const IDENTITY: Transform = [1, 0, 0, 1, 0, 0];

/** `inner` first, then `outer`. */
export function combine(outer: Transform, inner: Transform): Transform {
	const [a, b, c, d, e, f] = outer;
	const [g, h, i, j, k, l] = inner;
	return [a * g + c * h, b * g + d * h, a * i + c * j, b * i + d * j, a * k + c * l + e, b * k + d * l + f];
}

/** An SVG transform list, its leftmost function the outermost; what it doesn't know leaves things where they are. */
export function readTransform(text: string): Transform {
	let whole = IDENTITY;
	for (const [, name, list] of text.matchAll(/([a-zA-Z]+)\s*\(([^)]*)\)/g)) {
		const values = list.match(/[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?/g)?.map(Number) ?? [];
		whole = combine(whole, oneTransform(name, values));
	}
	return whole;
}

function oneTransform(name: string, v: readonly number[]): Transform {
	const radians = ((v[0] ?? 0) * Math.PI) / 180;
	switch (name) {
		case "matrix":
			return v.length === 6 ? [v[0], v[1], v[2], v[3], v[4], v[5]] : IDENTITY;
		case "translate":
			return [1, 0, 0, 1, v[0] ?? 0, v[1] ?? 0];
		case "scale":
			return [v[0] ?? 1, 0, 0, v[1] ?? v[0] ?? 1, 0, 0];
		case "rotate": {
			const turn: Transform = [Math.cos(radians), Math.sin(radians), -Math.sin(radians), Math.cos(radians), 0, 0];
			if (v.length < 3) return turn;
			return combine(combine([1, 0, 0, 1, v[1], v[2]], turn), [1, 0, 0, 1, -v[1], -v[2]]);
		}
		case "skewX":
			return [1, 0, Math.tan(radians), 1, 0, 0];
		case "skewY":
			return [1, Math.tan(radians), 0, 1, 0, 0];
		default:
			return IDENTITY;
	}
}

/** Steps of an arc's angle that one cubic stands for: off by less than 1e-6 of its radius. */
const ARC_STEP = Math.PI / 6;

/** The segments under a transform; arcs become cubics, since a skewed arc is none that an arc can write. */
export function transformSegments(segments: readonly Segment[], [a, b, c, d, e, f]: Transform): Segment[] {
	const px = (x: number, y: number): number => a * x + c * y + e;
	const py = (x: number, y: number): number => b * x + d * y + f;
	const out: Segment[] = [];
	let [x, y, startX, startY] = [0, 0, 0, 0];
	const cubic = (x1: number, y1: number, x2: number, y2: number, xe: number, ye: number): void => {
		out.push({
			kind: "cubic",
			x1: px(x1, y1),
			y1: py(x1, y1),
			x2: px(x2, y2),
			y2: py(x2, y2),
			x: px(xe, ye),
			y: py(xe, ye),
		});
	};
	for (const segment of segments) {
		switch (segment.kind) {
			case "close":
				out.push(segment);
				[x, y] = [startX, startY];
				continue;
			case "move":
				[startX, startY] = [segment.x, segment.y];
				out.push({ kind: "move", x: px(segment.x, segment.y), y: py(segment.x, segment.y) });
				break;
			case "line":
				out.push({ kind: "line", x: px(segment.x, segment.y), y: py(segment.x, segment.y) });
				break;
			case "quadratic": {
				const { x1, y1 } = segment;
				out.push({
					kind: "quadratic",
					x1: px(x1, y1),
					y1: py(x1, y1),
					x: px(segment.x, segment.y),
					y: py(segment.x, segment.y),
				});
				break;
			}
			case "cubic":
				cubic(segment.x1, segment.y1, segment.x2, segment.y2, segment.x, segment.y);
				break;
			case "arc": {
				const arc = centreOfArc(x, y, segment);
				if (arc === null) {
					out.push({ kind: "line", x: px(segment.x, segment.y), y: py(segment.x, segment.y) });
					break;
				}
				const steps = Math.max(1, Math.ceil(Math.abs(arc.span) / ARC_STEP));
				const step = arc.span / steps;
				const reach = (4 / 3) * Math.tan(step / 4);
				const [cos, sin] = [Math.cos(arc.turn), Math.sin(arc.turn)];
				// Direction of the arc at a parameter, times the length that a cubic's handle has.
				const handle = (angle: number): [number, number] => {
					const [u, v] = [-arc.rx * Math.sin(angle) * reach, arc.ry * Math.cos(angle) * reach];
					return [u * cos - v * sin, u * sin + v * cos];
				};
				for (let i = 0; i < steps; i++) {
					const [from, to] = [arc.start + i * step, arc.start + (i + 1) * step];
					const [x0, y0] = pointOfArc(arc, from);
					const [xe, ye] = i === steps - 1 ? [segment.x, segment.y] : pointOfArc(arc, to);
					const [hx, hy] = handle(from);
					const [kx, ky] = handle(to);
					cubic(x0 + hx, y0 + hy, xe - kx, ye - ky, xe, ye);
				}
			}
		}
		[x, y] = [segment.x, segment.y];
	}
	return out;
}

/** Path data of segments, each number to nine digits. */
export function writePathData(segments: readonly Segment[]): string {
	const n = (value: number): string => String(Number(value.toPrecision(9)));
	return segments
		.map((s) => {
			switch (s.kind) {
				case "move":
					return `M${n(s.x)} ${n(s.y)}`;
				case "line":
					return `L${n(s.x)} ${n(s.y)}`;
				case "quadratic":
					return `Q${n(s.x1)} ${n(s.y1)} ${n(s.x)} ${n(s.y)}`;
				case "cubic":
					return `C${n(s.x1)} ${n(s.y1)} ${n(s.x2)} ${n(s.y2)} ${n(s.x)} ${n(s.y)}`;
				case "arc":
					return `A${n(s.rx)} ${n(s.ry)} ${n(s.rotation)} ${s.large ? 1 : 0} ${s.sweep ? 1 : 0} ${n(s.x)} ${n(s.y)}`;
				default:
					return "Z";
			}
		})
		.join("");
}
