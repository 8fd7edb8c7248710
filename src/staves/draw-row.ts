import type { BeatMap } from "../core/show/index.ts";
import { drawBeams } from "./draw-beams.ts";
import type { Inks } from "./inks.ts";
import type { Lanes } from "./lanes.ts";
import type { CueScore, RibbonPiece } from "./row-cues.ts";
import type { RowWindow } from "./row-layout.ts";

/** What one row is drawn from. Positions in beats, sizes in CSS pixels. */
export interface RowPicture {
	readonly row: RowWindow;
	readonly lanes: Lanes;
	readonly width: number;
	readonly pixelsPerBeat: number;
	/** The map by which the line is even in beats. */
	readonly beatMap: BeatMap;
	/** How many beats the grid has. */
	readonly beats: number;
	/** Where in the line a position stands: the position itself, but while a beat is dragged over the music. */
	readonly placeOf: (position: number) => number;
	readonly score: CueScore;
	readonly inks: Inks;
	readonly ribbonGroups: readonly string[];
	/** Positions of beats that want listening to. */
	readonly unsure: ReadonlySet<number>;
	readonly moments: readonly { readonly at: number; readonly kind: string }[];
}

/** Draws bar lines, beats, beams, ribbons and intensity of one row on a transparent canvas over the waveform. */
export function drawRow(pen: CanvasRenderingContext2D, picture: RowPicture, ratio: number): void {
	const { row, lanes, width } = picture;
	pen.setTransform(ratio, 0, 0, ratio, 0, 0);
	pen.clearRect(0, 0, width, lanes.height);
	pen.save();
	pen.beginPath();
	// Arrows and names of the last beam may stand out of the line, as an engraver lets a slur run on.
	pen.rect(-4, 0, width + 4, lanes.height);
	pen.clip();
	drawDoubt(pen, picture);
	drawGrid(pen, picture);
	drawRibbons(pen, picture);
	drawLevel(pen, picture);
	drawBeams(pen, picture);
	if (row.letter) drawDoubleBar(pen, picture);
	pen.restore();
}

/** CSS pixels from the line's start. */
export const xOf = (picture: RowPicture, position: number): number =>
	(picture.placeOf(position) - picture.row.from) * picture.pixelsPerBeat;

function drawGrid(pen: CanvasRenderingContext2D, picture: RowPicture): void {
	const { row, lanes, beatMap, inks, pixelsPerBeat } = picture;
	const first = Math.ceil(row.from - 1e-6);
	pen.font = `15px ${inks.sans}`;
	const nameEnd = row.name === "" ? 0 : pen.measureText(row.name).width + 14;
	pen.lineWidth = 1;
	for (let beat = first; beat <= row.to + 1e-6; beat++) {
		const x = Math.round(xOf(picture, beat)) + 0.5;
		const place = beatMap.barAt(beat + 1e-6);
		const isBar = place.beat < 1.01;
		pen.strokeStyle = isBar ? inks.barline : inks.hairline;
		pen.beginPath();
		if (isBar) {
			pen.moveTo(x, lanes.waveTop);
			pen.lineTo(x, lanes.height - 4);
		} else if (pixelsPerBeat >= 5) {
			pen.strokeStyle = inks.quiet;
			pen.moveTo(x, lanes.ticks);
			pen.lineTo(x, lanes.ticks + 4);
		}
		pen.stroke();
		// The section's name stands at the head of the line; a bar number must not run into it.
		const clear = x > nameEnd;
		const everyBar = pixelsPerBeat * beatMap.beatsPerBarAt(beat) > 64;
		if (
			isBar &&
			clear &&
			everyBar &&
			beat < row.to - 0.5 &&
			(place.bar - row.bar) % (pixelsPerBeat > 30 ? 1 : 4) === 0 &&
			place.bar !== row.bar
		) {
			pen.fillStyle = inks.quiet;
			pen.font = `12px ${inks.serif}`;
			pen.fillText(String(place.bar), x + 4, lanes.waveTop - 4);
		}
	}
	drawMoments(pen, picture);
}

/** Moments hang from the top of the music; where there is room, their names stand beside them. */
function drawMoments(pen: CanvasRenderingContext2D, picture: RowPicture): void {
	const { row, lanes, inks, pixelsPerBeat } = picture;
	pen.font = `12px ${inks.sans}`;
	for (const moment of picture.moments) {
		if (moment.at < row.from || moment.at >= row.to) continue;
		const x = xOf(picture, moment.at);
		pen.fillStyle = inks.ink;
		pen.beginPath();
		pen.moveTo(x - 4, lanes.waveTop);
		pen.lineTo(x + 4, lanes.waveTop);
		pen.lineTo(x, lanes.waveTop + 7);
		pen.fill();
		if (pixelsPerBeat <= 30) continue;
		pen.fillStyle = inks.quiet;
		pen.fillText(moment.kind, x + 8, lanes.waveTop + 9);
	}
}

/** Where the beat is uncertain the music is veiled, and a wavy line runs under it. */
function drawDoubt(pen: CanvasRenderingContext2D, picture: RowPicture): void {
	const { row, lanes, inks, unsure } = picture;
	for (let beat = Math.floor(row.from); beat <= row.to; beat++) {
		if (!unsure.has(beat)) continue;
		let last = beat;
		while (unsure.has(last + 1) && last < row.to) last++;
		const x0 = Math.max(0, xOf(picture, beat - 0.5));
		const x1 = Math.min(picture.width, xOf(picture, last + 0.5));
		beat = last;
		if (x1 <= x0) continue;
		pen.fillStyle = inks.page;
		pen.globalAlpha = 0.55;
		pen.fillRect(x0, lanes.waveTop, x1 - x0, lanes.waveHeight);
		pen.globalAlpha = 1;
		pen.strokeStyle = inks.trouble;
		pen.lineWidth = 1.25;
		pen.beginPath();
		const y = lanes.ticks + 1.5;
		pen.moveTo(x0, y);
		for (let x = x0, up = 1; x < x1; x += 5, up = -up) {
			const to = Math.min(x1, x + 5);
			pen.quadraticCurveTo((x + to) / 2, y + 4 * up, to, y);
		}
		pen.stroke();
	}
}

/** A section starts with a thin and a thick line through all its lanes. */
function drawDoubleBar(pen: CanvasRenderingContext2D, { lanes, inks }: RowPicture): void {
	pen.fillStyle = inks.ink;
	pen.fillRect(0, lanes.waveTop, 2.5, lanes.height - lanes.waveTop - 4);
	pen.fillRect(4.5, lanes.waveTop, 1, lanes.height - lanes.waveTop - 4);
}

function drawRibbons(pen: CanvasRenderingContext2D, picture: RowPicture): void {
	const { lanes, row } = picture;
	for (const piece of picture.score.ribbons) {
		const lane = picture.ribbonGroups.indexOf(piece.group);
		if (lane < 0 || lane >= lanes.ribbonCount || piece.to <= row.from || piece.from >= row.to) continue;
		const top = lanes.ribbonTop + lane * (lanes.ribbonHeight + 3);
		const from = Math.max(row.from, piece.from);
		const to = Math.min(row.to, piece.to);
		const [x0, x1] = [xOf(picture, from), xOf(picture, to)];
		pen.fillStyle = ribbonFill(pen, piece, top, lanes.ribbonHeight);
		pen.fillRect(x0, top, Math.max(1, x1 - x0), lanes.ribbonHeight);
		if (piece.fade > 0 && piece.from + piece.fade > row.from) {
			const stop = Math.min(x1, xOf(picture, piece.from + piece.fade));
			const veil = pen.createLinearGradient(xOf(picture, piece.from), 0, stop, 0);
			veil.addColorStop(0, picture.inks.page);
			veil.addColorStop(1, "transparent");
			pen.fillStyle = veil;
			pen.fillRect(x0, top, stop - x0, lanes.ribbonHeight);
		}
		if (piece.from >= row.from) {
			pen.fillStyle = piece.selected ? picture.inks.ink : picture.inks.page;
			pen.fillRect(x0, top - 2, piece.selected ? 2.5 : 1.5, lanes.ribbonHeight + 4);
		}
		if (piece.selected) {
			pen.strokeStyle = picture.inks.ink;
			pen.lineWidth = 1.5;
			pen.strokeRect(x0 - 0.5, top - 1.5, x1 - x0 + 1, lanes.ribbonHeight + 3);
		}
	}
}

function ribbonFill(
	pen: CanvasRenderingContext2D,
	piece: RibbonPiece,
	top: number,
	height: number,
): string | CanvasGradient {
	if (piece.colours.length === 1) return piece.colours[0];
	const fill = pen.createLinearGradient(0, top + height, 0, top);
	piece.colours.forEach((colour, i) => {
		fill.addColorStop(i / (piece.colours.length - 1), colour);
	});
	return fill;
}

function drawLevel(pen: CanvasRenderingContext2D, picture: RowPicture): void {
	const { lanes, row, inks } = picture;
	const { points, marks } = picture.score.level;
	if (points.length === 0) return;
	const yOf = (level: number) => lanes.levelTop + lanes.levelHeight * (1 - level);
	pen.save();
	pen.beginPath();
	pen.rect(0, lanes.levelTop - 4, picture.width, lanes.levelHeight + 8);
	pen.clip();
	pen.beginPath();
	pen.strokeStyle = inks.ink;
	pen.lineWidth = 1.25;
	let previous = points[0].level;
	let begun = false;
	for (const point of points) {
		if (point.at < row.from) {
			previous = point.level;
			continue;
		}
		if (!begun) {
			pen.moveTo(0, yOf(previous));
			begun = true;
		}
		const x = Math.min(picture.width, xOf(picture, Math.min(point.at, row.to + 1)));
		pen.lineTo(x, yOf(point.level));
		if (point.at > row.to) break;
	}
	pen.stroke();
	pen.restore();
	for (const mark of marks) {
		if (mark.at < row.from || mark.at >= row.to) continue;
		const x = xOf(picture, mark.at);
		pen.fillStyle = inks.ink;
		pen.fillRect(x - (mark.selected ? 2 : 0.75), lanes.levelTop - 1, mark.selected ? 4 : 1.5, lanes.levelHeight + 2);
	}
}
