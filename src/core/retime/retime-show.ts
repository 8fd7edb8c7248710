/**
 * A show carried over to a new edit of its soundtrack: grid, sections and cues go with the music they sit on. Nothing is
 * lost: cues whose music is gone wait in a tray in the show itself.
 */
import {
	type BeatMap,
	type Cue,
	createBeatMap,
	cueTimes,
	type Show,
	type Soundtrack,
	type TrayCue,
	toOrdered,
} from "../show/index.ts";
import { type CarriedTimes, carryCue } from "./carry-cue.ts";
import { type CarriedGrid, carryGrid, type HeardGrid } from "./carry-grid.ts";
import { carrySections, type HeardSection } from "./carry-sections.ts";
import type { EditMap } from "./edit-map.ts";
import type { Place } from "./places.ts";

/** One cue of the old show and what became of it. */
export interface CueMove {
	readonly id: string;
	readonly number: string;
	readonly kind: Cue["kind"];
	/** Seconds; `newTime` is null only for orphans. */
	readonly oldTime: number;
	readonly newTime: number | null;
	/** Beats in the old grid and the new one. */
	readonly oldPosition: number;
	readonly newPosition: number | null;
	readonly status: "moved" | "orphan" | "review";
	/** A sentence: why it is where it is, or what to look at. */
	readonly reason: string;
}

/** A cue whose music is heard again: proposed for the second time, not put in. */
export interface CueOffer {
	/** The cue that it would be a copy of. */
	readonly of: string;
	/** Seconds in the new soundtrack. */
	readonly time: number;
	/** The copy without id and number, as `addCue` takes it. */
	readonly cue: Omit<Cue, "id" | "number">;
	readonly reason: string;
}

export interface RetimeResult {
	readonly show: Show;
	/** One for every cue of the old show, in its order. */
	readonly cues: readonly CueMove[];
	readonly offers: readonly CueOffer[];
	/** The tray: this retime's orphans after those that waited there already. */
	readonly orphans: readonly TrayCue[];
	/** True where anything is to be looked at: a cue for review or an orphan, an offer, or another piece altogether. */
	readonly needsReview: boolean;
	readonly notes: readonly string[];
}

/** What is used of an analysis of the new soundtrack, and only where music was put in. */
export interface HeardMusic extends HeardGrid {
	readonly sections: readonly HeardSection[];
}

/**
 * @param map of the show's soundtrack and the new one
 * @param soundtrack the new one, as it will stand in the show
 * @param heard analysis of the new soundtrack; left out, the grid goes on at its own tempo where music was put in
 * @returns a new show; the old one is untouched. Where the map says "different", the show itself, nothing moved
 */
export function retimeShow(show: Show, map: EditMap, soundtrack: Soundtrack, heard?: HeardMusic): RetimeResult {
	const oldBeats = createBeatMap(show.grid);
	const tray = show.orphans ?? [];
	if (map.verdict === "different") return nothingMoved(show, map, oldBeats, tray);
	const carried = carryGrid(show.grid, map, heard);
	const newBeats = createBeatMap(carried.grid);
	const placer = createPlacer(map, carried, oldBeats, newBeats);
	const cues: Cue[] = [];
	const moves: CueMove[] = [];
	const offers: CueOffer[] = [];
	const orphans: TrayCue[] = [];
	for (const id of show.cues.order) {
		const cue = show.cues.byId[id];
		const { start, end } = cueTimes(cue, oldBeats);
		const times = carryCue(cue, map, oldBeats);
		const oldPosition = oldBeats.positionAt(start);
		const common = { id, number: cue.number, kind: cue.kind, oldTime: start, oldPosition };
		if (times.start === null) {
			orphans.push({ cue, time: start, soundtrack: show.soundtrack?.sha256 ?? "" });
			moves.push({ ...common, newTime: null, newPosition: null, status: "orphan", reason: times.reason });
			continue;
		}
		const next = moveCue(cue, times, placer);
		cues.push(next);
		const at = cueTimes(next, newBeats).start;
		const newPosition = newBeats.positionAt(at);
		moves.push({ ...common, newTime: at, newPosition, status: times.status, reason: times.reason });
		for (const place of times.again) offers.push(offerAgain(cue, place, end - start, placer));
	}
	const { soundtrack: old, ...rest } = show;
	const next: Show = {
		...rest,
		soundtrack,
		grid: carried.grid,
		sections: carrySections(show.sections, map, oldBeats, newBeats, heard?.sections),
		cues: toOrdered(cues),
		...(old === null ? {} : { retimedFrom: old }),
		...(tray.length + orphans.length > 0 ? { orphans: [...tray, ...orphans] } : {}),
	};
	const needsReview = offers.length > 0 || moves.some((move) => move.status !== "moved");
	return { show: next, cues: moves, offers, orphans: [...tray, ...orphans], needsReview, notes: map.notes };
}

function nothingMoved(show: Show, map: EditMap, oldBeats: BeatMap, tray: readonly TrayCue[]): RetimeResult {
	const cues = show.cues.order.map((id): CueMove => {
		const cue = show.cues.byId[id];
		const { start } = cueTimes(cue, oldBeats);
		const position = oldBeats.positionAt(start);
		return {
			id,
			number: cue.number,
			kind: cue.kind,
			oldTime: start,
			newTime: start,
			oldPosition: position,
			newPosition: position,
			status: "review",
			reason: "The new soundtrack is another piece, so nothing was moved.",
		};
	});
	return { show, cues, offers: [], orphans: tray, needsReview: true, notes: map.notes };
}

/** New position of a new time that came from an old time with one stretch. */
interface Placer {
	position(newTime: number, oldTime: number | null, stretch: CarriedTimes["stretch"]): number;
}

/**
 * Between two beats of one stretch a position goes over whole, old beat plus a shift, so that no rounding can move it;
 * elsewhere the new grid says where the time lies.
 */
function createPlacer(map: EditMap, carried: CarriedGrid, oldBeats: BeatMap, newBeats: BeatMap): Placer {
	return {
		position(newTime, oldTime, stretch) {
			const exact = newBeats.positionAt(newTime);
			const shift = stretch === null ? null : carried.shifts[map.stretches.indexOf(stretch)];
			const shifts = shift === null || shift === undefined ? [0] : [shift, 0];
			for (const by of oldTime === null ? [] : shifts) {
				const whole = oldBeats.positionAt(oldTime as number) + by;
				if (Math.abs(whole - exact) < 1e-6) return whole;
			}
			return exact;
		},
	};
}

function moveCue(cue: Cue, times: CarriedTimes, placer: Placer): Cue {
	const start = times.start as number;
	return { ...cue, ...placed(cue, start, times.end, times.stretch, placer) };
}

function placed(
	cue: Cue,
	start: number,
	end: number,
	stretch: CarriedTimes["stretch"],
	placer: Placer,
): { at: number; length: number; pinned?: number } {
	const oldOf = (time: number): number | null =>
		stretch === null ? time : stretch.old[0] + (time - stretch.new[0]) * (stretch.rate ?? 1);
	const at = placer.position(start, oldOf(start), stretch);
	const to = placer.position(end, oldOf(end), stretch);
	const length = cue.length === 0 ? 0 : tidy(Math.max(0, to - at), cue.length);
	return cue.pinned === undefined ? { at: tidy(at, cue.at), length } : { at, length, pinned: start };
}

/** The old number itself, or a whole distance from it, where rounding is all that differs. */
function tidy(value: number, old: number): number {
	const by = Math.round(value - old);
	return Math.abs(value - old - by) < 1e-6 ? old + by : value;
}

function offerAgain(cue: Cue, place: Place, length: number, placer: Placer): CueOffer {
	const { id: _id, number, pinned: _pinned, ...rest } = cue;
	const end = place.time + length / (place.stretch.rate ?? 1);
	const { at, length: beats } = placed({ ...cue, pinned: undefined } as Cue, place.time, end, place.stretch, placer);
	return {
		of: cue.id,
		time: place.time,
		cue: { ...rest, at, length: beats } as CueOffer["cue"],
		reason: `The music of cue ${number} is heard again here.`,
	};
}
