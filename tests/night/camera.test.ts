import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { aimCamera, cornersOf, type NightViewpoint, projectPoint } from "../../src/night/camera.ts";

const extent = { min: [-40, 20, 0] as [number, number, number], max: [40, 60, 80] as [number, number, number] };
const aim = (viewpoint: NightViewpoint, aspect = 1.6) =>
	aimCamera({ viewpoint, aspect, extent, seat: [0, -60, 1.6], orbit: { turn: 0.4, lift: 0.3, distance: 160 } });

describe("the four viewpoints", () => {
	it("keep all of the extent in the picture, whatever its shape", () => {
		fc.assert(
			fc.property(
				fc.constantFrom<NightViewpoint>("audience", "plan", "elevation"),
				fc.double({ min: 0.4, max: 3, noNaN: true }),
				(viewpoint, aspect) => {
					const camera = aim(viewpoint, aspect);
					for (const [x, y, z] of cornersOf(extent)) {
						const point = projectPoint(camera, x, y, z, 100 * aspect, 100);
						expect(point).not.toBeNull();
						expect(point!.x).toBeGreaterThanOrEqual(0);
						expect(point!.x).toBeLessThanOrEqual(100 * aspect);
						expect(point!.y).toBeGreaterThanOrEqual(0);
						expect(point!.y).toBeLessThanOrEqual(100);
					}
				},
			),
		);
	});

	it("show the audience's right on the right and up as up", () => {
		for (const viewpoint of ["audience", "elevation"] as const) {
			const camera = aim(viewpoint);
			const low = projectPoint(camera, -10, 40, 20, 160, 100)!;
			const high = projectPoint(camera, 10, 40, 60, 160, 100)!;
			expect(high.x).toBeGreaterThan(low.x);
			expect(high.y).toBeLessThan(low.y);
		}
		const plan = aim("plan");
		expect(projectPoint(plan, 0, 55, 0, 160, 100)!.y).toBeLessThan(projectPoint(plan, 0, 25, 0, 160, 100)!.y);
	});

	it("say that a point behind the eye is not in the picture", () => {
		expect(projectPoint(aim("audience"), 0, -200, 0, 160, 100)).toBeNull();
	});
});
