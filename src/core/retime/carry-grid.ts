/**
 * The old beat grid, hand-corrected as it may be, carried through the edit map: a beat stays on its music to the sample.
 * Only where music was put in does the new analysis, or the old tempo going on, fill the grid.
 */
import type { Bar, Grid } from "../show/index.ts";
import { type EditMap, isCarried, newTimeIn, type Stretch } from "./edit-map.ts";
import { spreadAt } from "./places.ts";

/** What the grid needs of an analysis of the new soundtrack. */
export interface HeardGrid {
	/** Seconds, rising. */
	readonly beats: ArrayLike<number>;
	readonly bars: readonly Bar[];
}

/** Shares of a beat's interval: closer neighbours over a joint are one beat; a gap wider than this is filled. */
const CLOSEST = 0.45;
const WIDEST = 1.75;
const DEFAULT_INTERVAL = 0.5;

interface GridBeat {
	readonly time: number;
	/** Beat of the old grid, or −1. */
	readonly old: number;
	/** Place of its stretch in the map, −1 for what was filled in. */
	readonly stretch: number;
	/** Beats from the bar's first, and the bar's length; null where it must be counted on. */
	readonly inBar: number | null;
	readonly beatsPerBar: number | null;
}

export interface CarriedGrid {
	readonly grid: Grid;
	/** For each stretch of the map: new beat index less old beat index, or null where it carries no beat. */
	readonly shifts: readonly (number | null)[];
	/** For each new beat: the place of its stretch in the map, or −1. */
	readonly stretchOf: Int32Array;
}

export function carryGrid(old: Grid, map: EditMap, heard?: HeardGrid): CarriedGrid {
	const shifts: (number | null)[] = map.stretches.map(() => null);
	if (old.beats.length === 0) return { grid: wholeHeard(old, heard), shifts, stretchOf: new Int32Array(0) };
	const places = placesInBars(old.bars, old.beats.length);
	let beats: GridBeat[] = [];
	map.stretches.forEach((stretch, index) => {
		if (isCarried(stretch)) beats.push(...carriedBeats(old, map, stretch, index, places));
		else if (stretch.kind === "inserted" && heard !== undefined) beats.push(...heardBeats(heard, stretch));
	});
	beats = fillGaps(partBeats(beats), map);
	const times = beats.map((beat) => beat.time);
	beats.forEach((beat, i) => {
		if (beat.stretch >= 0 && shifts[beat.stretch] === null) shifts[beat.stretch] = i - beat.old;
	});
	return {
		grid: { beats: times, bars: countBars(beats), source: old.source },
		shifts,
		stretchOf: Int32Array.from(beats, (beat) => beat.stretch),
	};
}

function wholeHeard(old: Grid, heard: HeardGrid | undefined): Grid {
	if (heard === undefined) return old;
	return { beats: Array.from(heard.beats), bars: heard.bars.map((bar) => ({ ...bar })), source: "analysed" };
}

/** Beats from the bar's first and the bar's length, for every beat; null before bar 1. */
function placesInBars(bars: readonly Bar[], count: number): { inBar: number; beatsPerBar: number }[] {
	const places: { inBar: number; beatsPerBar: number }[] = [];
	let bar = -1;
	for (let beat = 0; beat < count; beat++) {
		while (bar + 1 < bars.length && bars[bar + 1].beat <= beat) bar++;
		if (bar < 0) {
			const metre = bars[0]?.beatsPerBar ?? 4;
			const before = (bars[0]?.beat ?? 0) - beat;
			places.push({ inBar: (((-before % metre) + metre) % metre) | 0, beatsPerBar: metre });
			continue;
		}
		const { beat: start, beatsPerBar } = bars[bar];
		// Past the last bar of the list the bars go on at its length.
		const inBar = bar === bars.length - 1 ? (beat - start) % beatsPerBar : beat - start;
		places.push({ inBar, beatsPerBar });
	}
	return places;
}

function carriedBeats(
	old: Grid,
	map: EditMap,
	stretch: Stretch,
	index: number,
	places: readonly { inBar: number; beatsPerBar: number }[],
): GridBeat[] {
	// Where a stretch touches an end of both soundtracks, beats outside the sound belong to it too.
	const first = stretch.old[0] < 0.05 && stretch.new[0] < 0.05;
	const last = map.oldDuration - stretch.old[1] < 0.05 && map.newDuration - stretch.new[1] < 0.05;
	const from = first ? Number.NEGATIVE_INFINITY : stretch.old[0] - spreadAt(map, stretch.new[0]);
	const to = last ? Number.POSITIVE_INFINITY : stretch.old[1] - spreadAt(map, stretch.new[1]);
	const beats: GridBeat[] = [];
	old.beats.forEach((time, beat) => {
		if (time < from || time >= to) return;
		beats.push({ time: newTimeIn(stretch, time), old: beat, stretch: index, ...places[beat] });
	});
	return beats;
}

function heardBeats(heard: HeardGrid, stretch: Stretch): GridBeat[] {
	const places = placesInBars(heard.bars, heard.beats.length);
	const beats: GridBeat[] = [];
	for (let i = 0; i < heard.beats.length; i++) {
		const time = heard.beats[i];
		if (time >= stretch.new[0] && time < stretch.new[1]) beats.push({ time, old: -1, stretch: -1, ...places[i] });
	}
	return beats;
}

/** Takes out what stands too close: of two beats over a joint, the filled-in one, else the earlier. */
function partBeats(beats: readonly GridBeat[]): GridBeat[] {
	const kept: GridBeat[] = [];
	for (let i = 0; i < beats.length; i++) {
		const beat = beats[i];
		const before = kept[kept.length - 1];
		if (before === undefined || (before.stretch === beat.stretch && before.stretch >= 0)) {
			kept.push(beat);
			continue;
		}
		if (beat.time - before.time >= CLOSEST * intervalAround(beats, i)) kept.push(beat);
		else if (before.stretch < 0 || beat.stretch >= 0) kept[kept.length - 1] = beat;
	}
	// A replaced beat may leave one that isn't after its neighbour: the grid must rise.
	return kept.filter((beat, i) => i === 0 || beat.time > kept[i - 1].time + 1e-6);
}

/** The interval of the beats' own source next to a beat. */
function intervalAround(beats: readonly GridBeat[], i: number): number {
	const sameSource = (a: number, b: number): boolean =>
		a >= 0 && b < beats.length && beats[a].stretch === beats[b].stretch && beats[b].time > beats[a].time;
	if (sameSource(i, i + 1)) return beats[i + 1].time - beats[i].time;
	if (sameSource(i - 2, i - 1)) return beats[i - 1].time - beats[i - 2].time;
	return DEFAULT_INTERVAL;
}

/** Where music was put in and nothing was heard, the tempo before goes on (before the first beat, the one after). */
function fillGaps(beats: readonly GridBeat[], map: EditMap): GridBeat[] {
	if (beats.length < 2) return [...beats];
	const inserted = map.stretches.filter((stretch) => stretch.kind === "inserted");
	const isNew = (time: number): boolean => inserted.some(({ new: [from, to] }) => time > from - 1e-6 && time < to);
	const filled = (time: number): GridBeat => ({ time, old: -1, stretch: -1, inBar: null, beatsPerBar: null });
	const out: GridBeat[] = [];
	const firstInterval = beats[1].time - beats[0].time;
	for (let n = Math.floor(beats[0].time / firstInterval); n >= 1; n--) {
		const time = beats[0].time - n * firstInterval;
		if (isNew(time)) out.push(filled(time));
	}
	for (let i = 0; i < beats.length; i++) {
		out.push(beats[i]);
		const next = beats[i + 1];
		const interval = i > 0 ? beats[i].time - beats[i - 1].time : firstInterval;
		if (next === undefined) break;
		const gap = next.time - beats[i].time;
		// Only over what was put in: elsewhere the old grid meant what it said.
		if (gap <= WIDEST * interval || !inserted.some(({ new: [from, to] }) => to > beats[i].time && from < next.time)) {
			continue;
		}
		const parts = Math.max(1, Math.round(gap / interval));
		for (let n = 1; n < parts; n++) out.push(filled(beats[i].time + (gap * n) / parts));
	}
	const last = out[out.length - 1].time;
	const interval = last - out[out.length - 2].time;
	for (let time = last + interval; time < map.newDuration; time += interval) {
		if (!isNew(time)) break;
		out.push(filled(time));
	}
	return out;
}

/**
 * Bars: a beat that was a first beat is one; filled-in beats are counted on from the bar before, or back from the bar
 * after; where a joint breaks a bar off, what is left of it is a bar of its own.
 */
function countBars(beats: readonly GridBeat[]): Bar[] {
	const starts: { beat: number; beatsPerBar: number }[] = [];
	const firstKnown = beats.findIndex((beat) => beat.inBar === 0);
	if (firstKnown < 0) return [];
	const metre = beats[firstKnown].beatsPerBar ?? 4;
	for (let beat = firstKnown % metre; beat < firstKnown; beat += metre) {
		if (beats.slice(beat, firstKnown).every((one) => one.inBar === null)) starts.push({ beat, beatsPerBar: metre });
	}
	let inBar = 0;
	let current = metre;
	for (let i = firstKnown; i < beats.length; i++) {
		const beat = beats[i];
		const expected = i === firstKnown ? 0 : inBar + 1;
		const place = beat.inBar ?? (expected >= current ? 0 : expected);
		const joint = i > 0 && beats[i - 1].stretch !== beat.stretch;
		if (beat.beatsPerBar !== null) current = beat.beatsPerBar;
		if (place === 0 || (joint && place !== expected))
			starts.push({ beat: i, beatsPerBar: Math.max(1, current - place) });
		inBar = place;
	}
	// A bar is as long as it is to the next one; only where that cut it short or drew it out does this say otherwise.
	return starts.map((bar, i) => {
		const next = starts[i + 1];
		return next === undefined ? bar : { beat: bar.beat, beatsPerBar: next.beat - bar.beat };
	});
}
