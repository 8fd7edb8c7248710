import { type Camera, projectPoint } from "./camera.ts";

/** Outlines on the ground that are laid over the sky seen from above; m, right and away. */
export interface GroundMarks {
	/** Corners of the fall zone; null where nothing falls. */
	readonly zone: readonly (readonly [number, number])[] | null;
	/** The zone comes too near to people or leaves the border. */
	readonly breaks: boolean;
	/** Corners of the flight volume with its buffer. */
	readonly border: readonly (readonly [number, number])[];
	readonly audience: readonly [readonly [number, number], readonly [number, number]] | null;
}

const TROUBLE = "#ff6a4d";
const INK = "#efe7d6";
const QUIET = "#a9a693";

/** Draws them; sizes in CSS pixels times `ratio`. */
export function drawGround(
	pen: CanvasRenderingContext2D,
	camera: Camera,
	marks: GroundMarks,
	width: number,
	height: number,
	ratio: number,
): void {
	const trace = (corners: readonly (readonly [number, number])[], closed: boolean): void => {
		pen.beginPath();
		for (const [x, y] of corners) {
			const point = projectPoint(camera, x, y, 0, width, height);
			if (point) pen.lineTo(point.x, point.y);
		}
		if (closed) pen.closePath();
		pen.stroke();
	};
	const label = (text: string, x: number, y: number, ink: string, under: boolean): void => {
		const point = projectPoint(camera, x, y, 0, width, height);
		if (!point) return;
		pen.fillStyle = ink;
		pen.fillText(text, point.x, point.y + (under ? 16 : -6) * ratio);
	};
	pen.save();
	pen.font = `${13 * ratio}px "Atkinson Hyperlegible Next Variable", sans-serif`;
	pen.textAlign = "center";
	pen.lineWidth = ratio;
	pen.strokeStyle = QUIET;
	pen.setLineDash([2 * ratio, 4 * ratio]);
	trace(marks.border, true);
	if (marks.zone) {
		const ink = marks.breaks ? TROUBLE : INK;
		pen.lineWidth = 1.5 * ratio;
		pen.strokeStyle = ink;
		pen.setLineDash([9 * ratio, 5 * ratio]);
		trace(marks.zone, true);
		const far = marks.zone.reduce((a, b) => (b[1] > a[1] ? b : a));
		label("fall zone", far[0], far[1], ink, false);
	}
	if (marks.audience) {
		const [from, to] = marks.audience;
		pen.setLineDash([]);
		pen.lineWidth = 2 * ratio;
		pen.strokeStyle = INK;
		trace(marks.audience, false);
		label("audience line", (from[0] + to[0]) / 2, (from[1] + to[1]) / 2, QUIET, true);
	}
	pen.restore();
}
