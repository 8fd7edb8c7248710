import type { Verdict } from "../core/flight/index.ts";
import { type RowPicture, xOf as xIn } from "./draw-row.ts";
import type { Beam } from "./row-cues.ts";

/** Transitions as beams from hold to hold; names of formations where they stand; marks of verdicts. */
export function drawBeams(pen: CanvasRenderingContext2D, picture: RowPicture): void {
	const { row, lanes, inks } = picture;
	const xOf = (position: number) => xIn(picture, position);
	const middle = lanes.beamTop + lanes.beamHeight / 2;
	for (const hold of picture.score.holds) {
		if (hold.to <= row.from || hold.from >= row.to) continue;
		const x0 = Math.max(0, xOf(hold.from));
		const x1 = Math.min(picture.width, xOf(hold.to));
		pen.strokeStyle = inks.flight;
		pen.globalAlpha = 0.55;
		pen.lineWidth = 1;
		pen.beginPath();
		for (const y of [middle - 2.5, middle + 2.5]) {
			pen.moveTo(x0 + 2, Math.round(y) + 0.5);
			pen.lineTo(x1 - 2, Math.round(y) + 0.5);
		}
		pen.stroke();
		pen.globalAlpha = 1;
		// A line's head says what stands; after that each hold says it once.
		const room = x1 - x0 - 8;
		if (room > 24) nameHold(pen, hold.name, x0 + (x0 < 1 ? 10 : 4), lanes.beamTop - 4, room, picture);
	}
	const here = picture.score.beams
		.filter((beam) => Math.max(beam.arrives, beam.needs ?? 0) > row.from && beam.departs < row.to)
		.sort((a, b) => a.departs - b.departs);
	here.forEach((beam, i) => {
		drawBeam(pen, beam, picture, xOf);
		const next = here[i + 1];
		nameBeam(pen, beam, Math.max(xOf(beam.departs), 0) + 18, next ? xOf(next.departs) - 4 : picture.width, picture);
	});
}

/** The cue's number, and whether it is called, as far as there is room before the next. */
function nameBeam(pen: CanvasRenderingContext2D, beam: Beam, x: number, end: number, picture: RowPicture): void {
	if (picture.pixelsPerBeat <= 14) return;
	pen.font = `12px ${picture.inks.serif}`;
	pen.fillStyle = picture.inks.quiet;
	const texts = beam.called ? [`${beam.number} called`, beam.number] : [beam.number];
	const text = texts.find((one) => x + pen.measureText(one).width <= end);
	if (text) pen.fillText(text, x, picture.lanes.markY + 4);
}

function nameHold(
	pen: CanvasRenderingContext2D,
	name: string,
	x: number,
	y: number,
	room: number,
	picture: RowPicture,
): void {
	pen.font = `13px ${picture.inks.sans}`;
	pen.fillStyle = picture.inks.ink;
	let text = name;
	while (text.length > 1 && pen.measureText(text).width > room)
		text = `${text.slice(0, text.endsWith("…") ? -2 : -1)}…`;
	if (text.length > 1) pen.fillText(text, x, y);
}

function drawBeam(
	pen: CanvasRenderingContext2D,
	beam: Beam,
	picture: RowPicture,
	xOf: (position: number) => number,
): void {
	const { lanes, inks } = picture;
	const x0 = xOf(beam.departs);
	const x1 = xOf(beam.arrives);
	const { beamTop: top, beamHeight: height } = lanes;
	pen.fillStyle = inks.page;
	pen.fillRect(x0, top, x1 - x0, height);
	const fails = beam.verdict !== null && beam.verdict !== "flies" && beam.verdict !== "tight";
	if (beam.needs !== null) {
		pen.fillStyle = inks.flightFill;
		const fill = Math.min(beam.needs, beam.arrives);
		roundedBox(pen, x0 + 1.5, top + 1.5, Math.max(0, xOf(fill) - x0 - 3), height - 3);
		pen.fill();
	}
	pen.strokeStyle = fails ? inks.trouble : inks.flight;
	pen.lineWidth = 1.5;
	roundedBox(pen, x0, top, Math.max(2, x1 - x0), height);
	pen.stroke();
	if (beam.needs !== null && beam.short > 1e-6) drawShort(pen, beam, picture, x1, xOf(beam.needs));
	drawVerdict(pen, beam.verdict, Math.max(x0 + 7, Math.min(8, x1)), lanes.markY, inks);
	if (beam.selected) {
		pen.strokeStyle = inks.ink;
		pen.setLineDash([3, 3]);
		pen.lineWidth = 1;
		pen.strokeRect(x0 - 3.5, top - 3.5, x1 - x0 + 7, height + 7);
		pen.setLineDash([]);
		pen.fillStyle = inks.ink;
		pen.fillRect(x0 - 2, top + 3, 4, height - 6);
		pen.fillRect(x1 - 2, top + 3, 4, height - 6);
	}
}

/** What doesn't fit runs past its end as an open arrow, with how much on it. */
function drawShort(pen: CanvasRenderingContext2D, beam: Beam, picture: RowPicture, x1: number, xNeeds: number): void {
	const { lanes, inks } = picture;
	const middle = lanes.beamTop + lanes.beamHeight / 2;
	// It stays within the line, whose end may lie nearer than where the flight would arrive.
	const tip = Math.min(Math.max(x1 + 14, xNeeds), picture.width + 2);
	const start = Math.min(x1 + 1, tip - 12);
	const [y0, y1] = [middle - 4, middle + 4];
	pen.strokeStyle = inks.trouble;
	pen.fillStyle = inks.page;
	pen.lineWidth = 1.5;
	pen.beginPath();
	pen.moveTo(start, y0);
	pen.lineTo(tip - 7, y0);
	pen.lineTo(tip - 7, y0 - 3);
	pen.lineTo(tip, middle);
	pen.lineTo(tip - 7, y1 + 3);
	pen.lineTo(tip - 7, y1);
	pen.lineTo(start, y1);
	pen.fill();
	pen.stroke();
	pen.font = `13px ${inks.sans}`;
	const words = `${beam.short < 0.05 ? "<0.1" : beam.short.toFixed(1)} beats short`;
	const wide = pen.measureText(words).width;
	const x = tip + 6 + wide < picture.width ? tip + 6 : Math.max(4, start - wide - 8);
	pen.fillStyle = inks.page;
	pen.globalAlpha = 0.8;
	pen.fillRect(x - 3, middle - 8, wide + 6, 16);
	pen.globalAlpha = 1;
	pen.fillStyle = inks.trouble;
	pen.fillText(words, x, middle + 4.5);
}

/**
 * Marks differ by shape before colour: flies = a ring; tight = a ring with a gap; too fast = a forward chevron pair; too
 * close = two touching dots; out of venue = a corner; not checked yet = a dotted ring.
 */
export function drawVerdict(
	pen: CanvasRenderingContext2D,
	verdict: Verdict | null,
	x: number,
	y: number,
	inks: { flight: string; trouble: string; quiet: string },
): void {
	const r = 4;
	pen.lineWidth = 1.75;
	pen.strokeStyle = pen.fillStyle =
		verdict === null ? inks.quiet : verdict === "flies" || verdict === "tight" ? inks.flight : inks.trouble;
	pen.beginPath();
	switch (verdict) {
		case "flies":
			pen.arc(x, y, r, 0, 2 * Math.PI);
			break;
		case "tight":
			pen.arc(x, y, r, 0.25 * Math.PI, 1.6 * Math.PI);
			break;
		case "too-fast":
			for (const dx of [-4, 1]) {
				pen.moveTo(x + dx, y - r);
				pen.lineTo(x + dx + r, y);
				pen.lineTo(x + dx, y + r);
			}
			break;
		case "too-close":
			pen.arc(x - 2.6, y, 2.6, 0, 2 * Math.PI);
			pen.moveTo(x + 5.2, y);
			pen.arc(x + 2.6, y, 2.6, 0, 2 * Math.PI);
			pen.fill();
			return;
		case "out-of-venue":
			pen.moveTo(x - r, y - r);
			pen.lineTo(x + r, y - r);
			pen.lineTo(x + r, y + r);
			break;
		case null:
			pen.setLineDash([1.5, 2]);
			pen.arc(x, y, r, 0, 2 * Math.PI);
			break;
	}
	pen.stroke();
	pen.setLineDash([]);
}

function roundedBox(pen: CanvasRenderingContext2D, x: number, y: number, width: number, height: number): void {
	pen.beginPath();
	pen.roundRect(x, y, width, height, 3);
}
