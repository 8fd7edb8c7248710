import type { Box } from "../core/show/index.ts";

/** How the sky is looked at. `audience`: from the reference seat; `plan`: from above; `elevation`: from the front. */
export type NightViewpoint = "audience" | "plan" | "elevation" | "free";

/** Where the free view stands: angles in radians about `centre`, distance in metres. */
export interface Orbit {
	turn: number;
	lift: number;
	distance: number;
}

/** 16 numbers, column-major: show frame in metres → clip space. */
export type Matrix = Float32Array;

export interface CameraSetting {
	readonly viewpoint: NightViewpoint;
	/** Width over height of the canvas. */
	readonly aspect: number;
	/** What should be in the picture, m. */
	readonly extent: Box;
	/** Eye of the audience view, m. */
	readonly seat: readonly [number, number, number];
	readonly orbit: Orbit;
}

export interface Camera {
	readonly matrix: Matrix;
	/** Pixels a metre at the middle of the picture, for a canvas one pixel high. */
	readonly scale: number;
	/** True where things shrink with distance. */
	readonly perspective: boolean;
}

type Vector = readonly [number, number, number];

const sub = (a: Vector, b: Vector): Vector => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
const dot = (a: Vector, b: Vector): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a: Vector, b: Vector): Vector => [
	a[1] * b[2] - a[2] * b[1],
	a[2] * b[0] - a[0] * b[2],
	a[0] * b[1] - a[1] * b[0],
];
const unit = (a: Vector): Vector => {
	const length = Math.hypot(...a) || 1;
	return [a[0] / length, a[1] / length, a[2] / length];
};

/** The corners of a box, m. */
export function cornersOf(box: Box): Vector[] {
	const corners: Vector[] = [];
	for (const x of [box.min[0], box.max[0]])
		for (const y of [box.min[1], box.max[1]]) for (const z of [box.min[2], box.max[2]]) corners.push([x, y, z]);
	return corners;
}

/** The matrix that shows all of `extent` from the viewpoint, with a margin of a tenth. */
export function aimCamera(setting: CameraSetting): Camera {
	const { extent } = setting;
	const centre: Vector = [
		(extent.min[0] + extent.max[0]) / 2,
		(extent.min[1] + extent.max[1]) / 2,
		(extent.min[2] + extent.max[2]) / 2,
	];
	if (setting.viewpoint === "plan") return lookFlat(setting, centre, [1, 0, 0], [0, 1, 0], [0, 0, -1]);
	if (setting.viewpoint === "elevation") return lookFlat(setting, centre, [1, 0, 0], [0, 0, 1], [0, 1, 0]);
	if (setting.viewpoint === "audience") return lookFrom(setting, setting.seat, centre, "fit");
	const { turn, lift, distance } = setting.orbit;
	const eye: Vector = [
		centre[0] + distance * Math.cos(lift) * Math.sin(turn),
		centre[1] - distance * Math.cos(lift) * Math.cos(turn),
		centre[2] + distance * Math.sin(lift),
	];
	return lookFrom(setting, eye, centre, 0.9);
}

/** Parallel projection on the plane of `right` and `up`. */
function lookFlat(setting: CameraSetting, centre: Vector, right: Vector, up: Vector, ahead: Vector): Camera {
	let halfWide = 1;
	let halfHigh = 1;
	let halfDeep = 1;
	for (const corner of cornersOf(setting.extent)) {
		const from = sub(corner, centre);
		halfWide = Math.max(halfWide, Math.abs(dot(from, right)));
		halfHigh = Math.max(halfHigh, Math.abs(dot(from, up)));
		halfDeep = Math.max(halfDeep, Math.abs(dot(from, ahead)));
	}
	const half = 1.12 * Math.max(halfHigh, halfWide / setting.aspect);
	const [sx, sy, sz] = [1 / (half * setting.aspect), 1 / half, 1 / (20 * halfDeep)];
	const matrix = new Float32Array(16);
	for (let i = 0; i < 3; i++) {
		matrix[4 * i] = sx * right[i]!;
		matrix[4 * i + 1] = sy * up[i]!;
		matrix[4 * i + 2] = sz * ahead[i]!;
	}
	matrix[12] = -sx * dot(right, centre);
	matrix[13] = -sy * dot(up, centre);
	matrix[14] = -sz * dot(ahead, centre);
	matrix[15] = 1;
	return { matrix, scale: 1 / (2 * half), perspective: false };
}

/** Central projection from `eye`; `opening` is half the vertical field of view in tangent, or wide enough for all. */
function lookFrom(setting: CameraSetting, eye: Vector, centre: Vector, opening: number | "fit"): Camera {
	const ahead = unit(sub(centre, eye));
	const right = unit(cross(ahead, Math.abs(ahead[2]) > 0.999 ? [0, 1, 0] : [0, 0, 1]));
	const up = cross(right, ahead);
	let tangent = opening === "fit" ? 0.1 : opening;
	if (opening === "fit") {
		for (const corner of cornersOf(setting.extent)) {
			const from = sub(corner, eye);
			const depth = Math.max(1, dot(from, ahead));
			tangent = Math.max(tangent, Math.abs(dot(from, up)) / depth, Math.abs(dot(from, right)) / depth / setting.aspect);
		}
		tangent = Math.min(1.4, tangent * 1.1);
	}
	const near = 0.5;
	const far = 5000;
	const [sx, sy] = [1 / (tangent * setting.aspect), 1 / tangent];
	const a = (far + near) / (far - near);
	const b = (-2 * far * near) / (far - near);
	const matrix = new Float32Array(16);
	for (let i = 0; i < 3; i++) {
		matrix[4 * i] = sx * right[i]!;
		matrix[4 * i + 1] = sy * up[i]!;
		matrix[4 * i + 2] = a * ahead[i]!;
		matrix[4 * i + 3] = ahead[i]!;
	}
	matrix[12] = -sx * dot(right, eye);
	matrix[13] = -sy * dot(up, eye);
	matrix[14] = b - a * dot(ahead, eye);
	matrix[15] = -dot(ahead, eye);
	return { matrix, scale: 1 / (2 * tangent), perspective: true };
}

/**
 * Where a point of the show frame stands on a canvas of `width` × `height` pixels; null behind the eye.
 */
export function projectPoint(
	camera: Camera,
	x: number,
	y: number,
	z: number,
	width: number,
	height: number,
): { x: number; y: number } | null {
	const m = camera.matrix;
	const w = m[3]! * x + m[7]! * y + m[11]! * z + m[15]!;
	if (w <= 1e-6) return null;
	const cx = (m[0]! * x + m[4]! * y + m[8]! * z + m[12]!) / w;
	const cy = (m[1]! * x + m[5]! * y + m[9]! * z + m[13]!) / w;
	return { x: ((cx + 1) / 2) * width, y: ((1 - cy) / 2) * height };
}
