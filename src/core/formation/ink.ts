import { fillInk } from "./fill-ink.ts";
import { type Contour, flattenSegments } from "./flatten.ts";
import type { Measure } from "./measure.ts";
import { uprightShare } from "./measure.ts";
import { spreadOutline } from "./outline.ts";
import { parsePathData } from "./path-data.ts";
import type { Spread } from "./spread-shape.ts";

/** What is drawn in one go and belongs together: a letter, a path of a drawing. */
export interface Ink {
	/** x right, y up, in units of the picture's height. */
	readonly contours: readonly Contour[];
	readonly colour?: string | undefined;
	/** Groups that its slots belong to. */
	readonly groups: readonly string[];
}

/** A slot on the picture: x, y and the index of the ink it stands on. */
export interface InkSlot {
	readonly x: number;
	readonly y: number;
	readonly ink: number;
}

/** Distance between curve and polyline, in heights of the picture: 0.3 mm on one of 30 m, less than the rounding. */
export const FLATNESS = 1e-5;

/** Path data to contours with y turned up, at `scale`, `flatness` in the result's own units. */
export function readContours(d: string, scale: number, flatness: number): Contour[] {
	return flattenSegments(parsePathData(d), flatness / scale).map((contour) => ({
		...contour,
		points: contour.points.map((value, i) => (i % 2 === 0 ? value : -value) * scale),
	}));
}

/** Moves contours, so that letters stand beside each other and pictures about the origin. */
export function moveContours(contours: readonly Contour[], dx: number, dy: number): Contour[] {
	return contours.map((contour) => ({
		...contour,
		points: contour.points.map((value, i) => value + (i % 2 === 0 ? dx : dy)),
	}));
}

/** Left, bottom, right, top of everything drawn; null where nothing is. */
export function extentOf(contours: readonly Contour[]): [number, number, number, number] | null {
	let [left, bottom, right, top] = [Infinity, Infinity, -Infinity, -Infinity];
	for (const { points } of contours)
		for (let i = 0; i < points.length; i += 2) {
			left = Math.min(left, points[i]);
			right = Math.max(right, points[i]);
			bottom = Math.min(bottom, points[i + 1]);
			top = Math.max(top, points[i + 1]);
		}
	return left <= right ? [left, bottom, right, top] : null;
}

/**
 * Spreads `count` slots over inks, centred on the origin, upright in x–z.
 * @param height metres for one unit of the contours
 */
export function spreadInk(
	inks: readonly Ink[],
	count: number,
	style: "outline" | "filled",
	height: number,
	measure: Measure,
): Spread {
	const share = uprightShare(measure);
	const [left, bottom, right, top] = extentOf(inks.flatMap((ink) => ink.contours)) ?? [0, 0, 0, 0];
	const centred = inks.map((ink) => ({
		...ink,
		contours: moveContours(ink.contours, -(left + right) / 2, -(bottom + top) / 2),
	}));
	const slots = style === "filled" ? fillInk(centred, count, share) : spreadOutline(centred, count, share);
	const positions = new Float64Array(3 * slots.length);
	const groups = new Map<string, number[]>();
	slots.forEach(({ x, y, ink }, i) => {
		positions[3 * i] = x * height;
		positions[3 * i + 2] = y * height;
		for (const name of inks[ink].groups) {
			const members = groups.get(name);
			if (members === undefined) groups.set(name, [i]);
			else members.push(i);
		}
	});
	return { positions, colours: slots.map(({ ink }) => inks[ink].colour), groups };
}
