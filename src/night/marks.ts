import { type Camera, projectPoint } from "./camera.ts";
import { drawGround, type GroundMarks } from "./ground-marks.ts";

/** What the designer must see besides the lights. */
export interface NightMarks {
	/** The closest pair of the selected transition: drones from 0, distance in metres as it stands at this instant. */
	readonly pair: {
		readonly drones: readonly [number, number];
		readonly distance: number;
		readonly breaks: boolean;
	} | null;
	/** Drones over one of their limits: a tick at the side. */
	readonly troubled: readonly number[];
	/** What lies on the ground; null where it isn't looked at. */
	readonly ground: GroundMarks | null;
	/** 3·M metres: slots of a picture that could be, as small rings; null: none. */
	readonly ghost: Float64Array | null;
}

const TROUBLE = "#ff6a4d";
const INK = "#efe7d6";
const FLIGHT = "#6fd0c6";

/** Draws the marks over the sky. Sizes in CSS pixels times `ratio`. */
export function drawMarks(
	pen: CanvasRenderingContext2D,
	camera: Camera,
	positions: Float32Array,
	marks: NightMarks,
	width: number,
	height: number,
	ratio: number,
): void {
	// In Chromium 156 a clear that no drawing follows is lost, and the marks of the frame before stay; a reset is not.
	if (typeof pen.reset === "function") pen.reset();
	else pen.clearRect(0, 0, width, height);
	if (marks.ground) drawGround(pen, camera, marks.ground, width, height, ratio);
	const at = (drone: number) =>
		projectPoint(camera, positions[3 * drone]!, positions[3 * drone + 1]!, positions[3 * drone + 2]!, width, height);
	pen.lineWidth = 1.5 * ratio;
	pen.strokeStyle = TROUBLE;
	pen.beginPath();
	for (const drone of marks.troubled) {
		const point = at(drone);
		if (!point) continue;
		pen.moveTo(point.x + 6 * ratio, point.y - 4 * ratio);
		pen.lineTo(point.x + 6 * ratio, point.y + 4 * ratio);
	}
	pen.stroke();
	if (marks.ghost) drawGhost(pen, camera, marks.ghost, width, height, ratio);
	if (!marks.pair) return;
	const a = at(marks.pair.drones[0]);
	const b = at(marks.pair.drones[1]);
	if (!a || !b) return;
	const ink = marks.pair.breaks ? TROUBLE : INK;
	pen.strokeStyle = ink;
	pen.fillStyle = ink;
	const angle = Math.atan2(b.y - a.y, b.x - a.x);
	const [nx, ny] = [-Math.sin(angle) * 5 * ratio, Math.cos(angle) * 5 * ratio];
	pen.beginPath();
	pen.moveTo(a.x, a.y);
	pen.lineTo(b.x, b.y);
	for (const end of [a, b]) {
		pen.moveTo(end.x - nx, end.y - ny);
		pen.lineTo(end.x + nx, end.y + ny);
	}
	pen.stroke();
	pen.font = `${13 * ratio}px "Atkinson Hyperlegible Next Variable", sans-serif`;
	const label = `${marks.pair.distance.toFixed(2)} m`;
	const x = Math.min(Math.max(a.x, b.x) + 8 * ratio, width - pen.measureText(label).width - 6 * ratio);
	pen.fillText(label, x, Math.max(a.y, b.y) + 16 * ratio);
}

function drawGhost(
	pen: CanvasRenderingContext2D,
	camera: Camera,
	ghost: Float64Array,
	width: number,
	height: number,
	ratio: number,
): void {
	pen.strokeStyle = FLIGHT;
	pen.lineWidth = ratio;
	pen.beginPath();
	for (let k = 0; k < ghost.length; k += 3) {
		const point = projectPoint(camera, ghost[k]!, ghost[k + 1]!, ghost[k + 2]!, width, height);
		if (!point) continue;
		pen.moveTo(point.x + 3 * ratio, point.y);
		pen.arc(point.x, point.y, 3 * ratio, 0, 2 * Math.PI);
	}
	pen.stroke();
}
