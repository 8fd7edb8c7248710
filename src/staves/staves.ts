import type { TransitionCheck } from "../core/flight/index.ts";
import type { Analysis } from "../core/music/index.ts";
import { doubtfulBeats } from "../core/music/index.ts";
import { type BeatMap, createBeatMap, endOfShow, type Show } from "../core/show/index.ts";
import { attachPointing } from "./attach-pointing.ts";
import { type Inks, readInks } from "./inks.ts";
import { layLanes } from "./lanes.ts";
import type { DragPart } from "./pointing.ts";
import { scoreCues } from "./row-cues.ts";
import { longestRow, pageRows, type RowWindow } from "./row-layout.ts";
import { StaveRow } from "./stave-row.ts";

/** What the staves show. */
export interface StavesModel {
	readonly show: Show;
	readonly analysis: Analysis | null;
	readonly checks: ReadonlyMap<string, TransitionCheck>;
	readonly unchecked: ReadonlySet<string>;
	readonly selectedCues: ReadonlySet<string>;
	readonly selectedSection: string | null;
	/** Null: page view. Else the strip's window, beats. */
	readonly strip: { readonly from: number; readonly to: number } | null;
}

/** What the user does on the staves. Positions in beats, already snapped. */
export interface StavesHandlers {
	seek(seconds: number): void;
	selectCue(id: string | null, add: boolean): void;
	selectSection(id: string): void;
	/** A drag begins; false refuses it. */
	beginDrag(id: string, part: DragPart): boolean;
	/**
	 * @param beats where the edge is taken to; for a whole cue, how far it is moved
	 * @returns why the drag stops here, for the user; null where it doesn't
	 */
	drag(beats: number): string | null;
	endDrag(keep: boolean): void;
	/** A drag of a beat begins; false refuses it. */
	beginBeatDrag(beat: number): boolean;
	/** @returns what is to be said at the pointer */
	dragBeat(seconds: number, free: boolean): string;
	endBeatDrag(keep: boolean): void;
	insertBeat(after: number): void;
	/** Ctrl and the wheel, or a pinch: zoom about a position. */
	zoom(factor: number, about: number): void;
}

export interface Staves {
	show(model: StavesModel): void;
	/** @param seconds where the ear is */
	setPlayhead(seconds: number): void;
	/** Brings a position into view. */
	reveal(position: number): void;
	resize(): void;
	destroy(): void;
}

const HEAD = 52;
const RIGHT = 24;

/** Puts the staves into `host`. */
export function createStaves(host: HTMLElement, handlers: StavesHandlers): Staves {
	const inks: Inks = readInks(host);
	const playhead = document.createElement("div");
	playhead.className = "stave-playhead";
	const hint = document.createElement("div");
	hint.className = "stave-hint";
	hint.hidden = true;
	let rows: StaveRow[] = [];
	let model: StavesModel | null = null;
	let beatMap: BeatMap = createBeatMap({ beats: [], bars: [] });
	let at = 0;
	let revealed: StaveRow | null = null;
	/** Says when the music must be laid on the beats anew: another analysis, other beats. */
	let musicKey = 0;
	let lastAnalysis: Analysis | null = null;
	let lastBeats: readonly number[] = [];
	/** The map as it was when the drag of a beat began: the music keeps still under the beats until it is over. */
	let frozen: BeatMap | null = null;

	const lay = () => {
		if (!model) return;
		const { show, analysis } = model;
		const current = createBeatMap(show.grid);
		beatMap = frozen ?? current;
		const placeOf = (position: number) => (frozen === null ? position : frozen.positionAt(current.secondsAt(position)));
		const windows: RowWindow[] = model.strip
			? [stripRow(show, beatMap, model.strip)]
			: pageRows(show.sections, beatMap, endOfShow(show, beatMap));
		const curves = analysis?.curves ?? [];
		const score = scoreCues(show, current, model.checks, model.unchecked, model.selectedCues, curves);
		const groups = [...new Set(score.ribbons.map((piece) => piece.group))].sort(
			(a, b) => Number(b === "all") - Number(a === "all") || (a < b ? -1 : 1),
		);
		const lanes = layLanes(model.strip !== null, groups.length);
		const space = Math.max(200, host.clientWidth - HEAD - RIGHT);
		const pixelsPerBeat = space / longestRow(windows);
		const music = frozen === null ? show.grid.beats : lastBeats;
		if (analysis !== lastAnalysis || music !== lastBeats) {
			lastAnalysis = analysis;
			lastBeats = music;
			musicKey++;
		}
		const unsure = new Set(analysis ? doubtfulBeats(show.grid, analysis) : []);
		// The analysis counts its own beats; the grid may have more or fewer by now.
		const moments = (analysis?.moments ?? []).map((moment) => ({
			at: current.positionAt(analysis?.beats[moment.beat] ?? 0),
			kind: moment.kind,
		}));
		while (rows.length > windows.length) rows.pop()?.destroy();
		while (rows.length < windows.length) rows.push(addRow());
		rows.forEach((row, i) => {
			const window = windows[i];
			const width = Math.max(8, (window.to - window.from) * pixelsPerBeat);
			row.lay(
				{
					row: window,
					lanes,
					width,
					pixelsPerBeat,
					beatMap,
					beats: show.grid.beats.length,
					placeOf,
					score,
					inks,
					ribbonGroups: groups,
					unsure,
					moments,
				},
				model?.selectedSection !== null && window.section === model?.selectedSection,
			);
		});
		drawVisible(true);
		place();
	};
	const addRow = (): StaveRow => {
		const row = new StaveRow(inks.music, () => {
			const section = row.picture?.row.section;
			if (section) handlers.selectSection(section);
		});
		host.append(row.element);
		return row;
	};
	/** Rows out of sight are drawn when they come into sight. */
	const stale = new Set<StaveRow>();
	const drawVisible = (all: boolean) => {
		if (all) for (const row of rows) stale.add(row);
		const box = host.getBoundingClientRect();
		for (const row of rows) {
			if (!stale.has(row)) continue;
			const place = row.element.getBoundingClientRect();
			if (place.bottom < box.top - 80 || place.top > box.bottom + 80) continue;
			row.draw(model?.analysis ?? null, String(musicKey));
			stale.delete(row);
		}
	};
	const place = () => {
		const position = beatMap.positionAt(at);
		const row = rows.find(({ picture }) => picture && position >= picture.row.from && position < picture.row.to);
		playhead.hidden = !row?.picture;
		if (!row?.picture) return;
		if (playhead.parentElement !== row.body) row.body.append(playhead);
		playhead.style.transform = `translateX(${(position - row.picture.row.from) * row.picture.pixelsPerBeat}px)`;
	};
	/** The row and position under the pointer; outside all rows, the nearest. */
	const under = (x: number, y: number): { row: StaveRow; position: number; x: number; y: number } | null => {
		let best: StaveRow | null = null;
		let distance = Number.POSITIVE_INFINITY;
		for (const row of rows) {
			const box = row.body.getBoundingClientRect();
			const away = Math.max(box.top - y, y - box.bottom, 0);
			if (away < distance) {
				distance = away;
				best = row;
			}
		}
		if (!best?.picture) return null;
		const box = best.body.getBoundingClientRect();
		const local = x - box.left;
		return {
			row: best,
			position: best.picture.row.from + local / best.picture.pixelsPerBeat,
			x: local,
			y: y - box.top,
		};
	};
	const freeze = (on: boolean) => {
		frozen = on ? beatMap : null;
		if (!on) lay();
	};
	const pointing = attachPointing({ host, under, handlers, hint, freeze, beatMap: () => beatMap });
	host.addEventListener("scroll", () => drawVisible(false), { passive: true });
	host.append(hint);

	return {
		show(next) {
			model = next;
			lay();
		},
		setPlayhead(seconds) {
			at = seconds;
			place();
		},
		reveal(position) {
			const row = rows.find(({ picture }) => picture && position >= picture.row.from && position < picture.row.to);
			// Once a row: who scrolls away while the music plays is left alone until the next line.
			if (row === undefined || row === revealed) return;
			revealed = row;
			row.element.scrollIntoView({ block: "nearest" });
		},
		resize: lay,
		destroy() {
			pointing.abort();
			for (const row of rows) row.destroy();
			rows = [];
			playhead.remove();
			hint.remove();
		},
	};
}

function stripRow(show: Show, beatMap: BeatMap, strip: { from: number; to: number }): RowWindow {
	const section = show.sections.find((one) => strip.from >= one.from && strip.from < one.to);
	return {
		section: section?.id ?? null,
		letter: section?.letter ?? "",
		name: section?.name ?? "",
		bar: beatMap.barAt(strip.from + 1e-6).bar,
		from: strip.from,
		to: strip.to,
	};
}
