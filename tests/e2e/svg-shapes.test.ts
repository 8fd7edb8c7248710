import type { Page } from "playwright-core";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { flattenSegments, parsePathData } from "../../src/core/formation/index.ts";
import { openStage, type Stage } from "./browser.ts";

/**
 * Paths of drawings against the browser's own geometry: SVGGeometryElement.getTotalLength and getPointAtLength (W3C SVG
 * 2, 9.6). Chromium's own lengths carry an error of some hundredths of a per cent, so the length is held to 0.1 % and
 * points to a thousandth of the drawing.
 */
const PATHS: Record<string, string> = {
	"lines with relative and absolute commands": "M10 10 L90 20 l-10 60 H20 v-30 Z",
	"cubic curves, smooth ones too": "M5 50 C 20 0 40 0 50 50 S 80 100 95 50 c 10 -20 20 -20 30 0",
	"quadratic curves, smooth ones too": "M0 0 Q 25 60 50 0 T 100 0 q 10 -40 30 10",
	"arcs, all four of each ellipse":
		"M10 50 A 40 25 30 0 0 60 80 A 40 25 30 1 0 90 20 A 30 30 0 0 1 20 20 A 20 40 -45 1 1 80 70",
	"an arc whose radii are too small": "M0 0 A 1 1 0 0 1 100 40",
	"numbers run together": "M.5.5 10-3.2e1.5.5-20 30l1e1-5,3-2.5",
	"several pieces": "M0 0 h20 v20 h-20 z m40 0 a10 10 0 1 0 20 0 a10 10 0 1 0 -20 0 z",
};

/** Runs in the page. */
function askBrowser(page: Page, d: string, parts: number): Promise<{ length: number; points: [number, number][] }> {
	return page.evaluate(
		([data, count]) => {
			const path = document.createElementNS("http://www.w3.org/2000/svg", "path");
			path.setAttribute("d", data);
			const length = path.getTotalLength();
			const points = Array.from({ length: count + 1 }, (_, i): [number, number] => {
				const point = path.getPointAtLength((length * i) / count);
				return [point.x, point.y];
			});
			return { length, points };
		},
		[d, parts] as const,
	);
}

/** Distance of a point to the nearest of our pieces. */
function distanceTo(pieces: readonly [number, number, number, number][], x: number, y: number): number {
	let best = Number.POSITIVE_INFINITY;
	for (const [ax, ay, bx, by] of pieces) {
		const [dx, dy] = [bx - ax, by - ay];
		const along = Math.min(1, Math.max(0, ((x - ax) * dx + (y - ay) * dy) / (dx * dx + dy * dy || 1)));
		best = Math.min(best, Math.hypot(x - ax - along * dx, y - ay - along * dy));
	}
	return best;
}

describe("paths of drawings", () => {
	let stage: Stage;
	let page: Page;
	beforeAll(async () => {
		stage = await openStage();
		({ page } = await stage.open());
	});
	afterAll(() => stage.close());

	for (const [name, d] of Object.entries(PATHS)) {
		it(`run where the browser draws them: ${name}`, async () => {
			const truth = await askBrowser(page, d, 97);
			const pieces: [number, number, number, number][] = [];
			for (const contour of flattenSegments(parsePathData(d), 1e-3)) {
				const count = contour.points.length / 2;
				for (let i = 0; i < (contour.closed ? count : count - 1); i++) {
					const j = (i + 1) % count;
					pieces.push([
						contour.points[2 * i],
						contour.points[2 * i + 1],
						contour.points[2 * j],
						contour.points[2 * j + 1],
					]);
				}
			}
			const length = pieces.reduce((sum, [ax, ay, bx, by]) => sum + Math.hypot(bx - ax, by - ay), 0);
			expect(Math.abs(length - truth.length) / truth.length).toBeLessThan(1e-3);
			for (const [x, y] of truth.points) expect(distanceTo(pieces, x, y)).toBeLessThan(0.1);
		});
	}
});
