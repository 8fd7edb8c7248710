import type { RowPicture } from "./draw-row.ts";

/** What the pointer is on: a cue and which part of it, a beat's tick, or the music itself. */
export type Target =
	| { readonly kind: "cue"; readonly id: string; readonly part: DragPart }
	| { readonly kind: "beat"; readonly beat: number }
	| { readonly kind: "music" };

/** `departs` and `arrives` are the ends of a transition; `whole` moves a cue as it is. */
export type DragPart = "departs" | "arrives" | "whole";

/** Pixels on either side of an edge in which the pointer takes it. */
const REACH = 6;
/** The same for a beat's tick, and the narrowest beats that can be taken: closer ones are meant by nobody. */
const BEAT_REACH = 4;
const BEAT_LEAST = 9;

/** @param x @param y CSS pixels from the row body's top left corner */
export function targetAt(picture: RowPicture, x: number, y: number): Target {
	const { lanes, row, score } = picture;
	const xOf = (position: number) => (position - row.from) * picture.pixelsPerBeat;
	if (y >= lanes.ticks - 8 && y < lanes.ticks + 6 && picture.pixelsPerBeat >= BEAT_LEAST) {
		const beat = Math.round(row.from + x / picture.pixelsPerBeat);
		const isBeat = beat >= 0 && beat < picture.beats;
		if (isBeat && Math.abs(xOf(beat) - x) <= BEAT_REACH) return { kind: "beat", beat };
	}
	if (y >= lanes.markY - 8 && y <= lanes.beamTop + lanes.beamHeight + 4) {
		// The selected beam first, so that its ends can be taken where two beams touch.
		const beams = [...score.beams].sort((a, b) => Number(b.selected) - Number(a.selected));
		for (const beam of beams) {
			if (Math.abs(x - xOf(beam.arrives)) <= REACH) return { kind: "cue", id: beam.id, part: "arrives" };
			if (Math.abs(x - xOf(beam.departs)) <= REACH) return { kind: "cue", id: beam.id, part: "departs" };
		}
		for (const beam of beams) {
			if (x > xOf(beam.departs) && x < xOf(beam.arrives)) return { kind: "cue", id: beam.id, part: "whole" };
		}
		return { kind: "music" };
	}
	const lane = Math.floor((y - lanes.ribbonTop + 2) / (lanes.ribbonHeight + 3));
	if (lane >= 0 && lane < lanes.ribbonCount) {
		const group = picture.ribbonGroups[lane];
		const position = row.from + x / picture.pixelsPerBeat;
		const piece = score.ribbons.find((one) => one.group === group && position >= one.from && position < one.to);
		if (piece) return { kind: "cue", id: piece.id, part: "whole" };
	}
	if (y >= lanes.levelTop - 4 && y <= lanes.levelTop + lanes.levelHeight + 6) {
		const near = score.level.marks.find((mark) => Math.abs(xOf(mark.at) - x) <= REACH);
		if (near) return { kind: "cue", id: near.id, part: "whole" };
	}
	return { kind: "music" };
}

/** Whole beats; quarters with Shift; free with Alt. */
export function snapPosition(position: number, keys: { shiftKey: boolean; altKey: boolean }): number {
	if (keys.altKey) return Math.round(position * 1000) / 1000;
	return keys.shiftKey ? Math.round(position * 4) / 4 : Math.round(position);
}
