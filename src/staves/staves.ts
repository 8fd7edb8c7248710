import type { TransitionCheck } from "../core/flight/index.ts";
import type { Analysis } from "../core/music/index.ts";
import { DOUBTFUL } from "../core/music/index.ts";
import { type BeatMap, createBeatMap, endOfShow, type Show } from "../core/show/index.ts";
import { type Inks, readInks } from "./inks.ts";
import { layLanes } from "./lanes.ts";
import { type DragPart, snapPosition, targetAt } from "./pointing.ts";
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
	let peaksKey = "";
	let lastAnalysis: Analysis | null = null;

	const lay = () => {
		if (!model) return;
		const { show, analysis } = model;
		beatMap = createBeatMap(show.grid);
		const windows: RowWindow[] = model.strip
			? [stripRow(show, beatMap, model.strip)]
			: pageRows(show.sections, beatMap, endOfShow(show, beatMap));
		const curves = analysis?.curves ?? [];
		const score = scoreCues(show, beatMap, model.checks, model.unchecked, model.selectedCues, curves);
		const groups = [...new Set(score.ribbons.map((piece) => piece.group))].sort(
			(a, b) => Number(b === "all") - Number(a === "all") || (a < b ? -1 : 1),
		);
		const lanes = layLanes(model.strip !== null, groups.length);
		const space = Math.max(200, host.clientWidth - HEAD - RIGHT);
		const pixelsPerBeat = space / longestRow(windows);
		if (analysis !== lastAnalysis || peaksKey === "") {
			lastAnalysis = analysis;
			peaksKey = String(Number(peaksKey || 0) + 1);
		}
		const unsure = new Set<number>();
		analysis?.beatConfidence.forEach((confidence, beat) => {
			if (confidence < DOUBTFUL && show.grid.source === "analysed") unsure.add(beat);
		});
		const moments = (analysis?.moments ?? []).map((moment) => ({ at: moment.beat, kind: moment.kind }));
		while (rows.length > windows.length) rows.pop()?.destroy();
		while (rows.length < windows.length) rows.push(addRow());
		rows.forEach((row, i) => {
			const window = windows[i];
			const width = Math.max(8, (window.to - window.from) * pixelsPerBeat);
			row.lay(
				{ row: window, lanes, width, pixelsPerBeat, beatMap, score, inks, ribbonGroups: groups, unsure, moments },
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
			row.draw(model?.analysis ?? null, peaksKey);
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
	const pointing = attachPointing(host, under, handlers, hint, () => beatMap);
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

type Under = (x: number, y: number) => { row: StaveRow; position: number; x: number; y: number } | null;

/** Pointer on the staves: select, drag with snapping, seek and scrub, zoom. Ends with the returned controller. */
function attachPointing(
	host: HTMLElement,
	under: Under,
	handlers: StavesHandlers,
	hint: HTMLElement,
	beatMap: () => BeatMap,
): AbortController {
	const ending = new AbortController();
	const { signal } = ending;
	let drag: { offset: number; moved: boolean; begun: boolean; id: string; part: DragPart; x: number } | null = null;
	let scrubbing = false;
	const finish = (keep: boolean) => {
		if (drag?.begun) handlers.endDrag(keep);
		drag = null;
		scrubbing = false;
		hint.hidden = true;
	};
	host.addEventListener(
		"pointerdown",
		(event) => {
			const found = event.button === 0 ? under(event.clientX, event.clientY) : null;
			if (!found?.row.picture || !(event.target instanceof Node) || !found.row.body.contains(event.target)) return;
			const target = targetAt(found.row.picture, found.x, found.y);
			host.setPointerCapture(event.pointerId);
			if (target.kind === "music") {
				scrubbing = true;
				handlers.selectCue(null, false);
				handlers.seek(beatMap().secondsAt(found.position));
				return;
			}
			handlers.selectCue(target.id, event.shiftKey || event.ctrlKey || event.metaKey);
			drag = { offset: found.position, moved: false, begun: false, id: target.id, part: target.part, x: event.clientX };
		},
		{ signal },
	);
	host.addEventListener(
		"pointermove",
		(event) => {
			const found = under(event.clientX, event.clientY);
			if (!found?.row.picture) return;
			if (scrubbing) return handlers.seek(beatMap().secondsAt(found.position));
			if (!drag) {
				const target = targetAt(found.row.picture, found.x, found.y);
				host.dataset.over = target.kind === "cue" ? (target.part === "whole" ? "cue" : "edge") : "music";
				return;
			}
			if (!drag.moved && Math.abs(event.clientX - drag.x) < 4) return;
			drag.moved = true;
			if (!drag.begun) {
				drag.begun = handlers.beginDrag(drag.id, drag.part);
				if (!drag.begun) return finish(false);
				drag.offset = drag.part === "whole" ? drag.offset : 0;
			}
			// An edge goes to the pointer; a whole cue keeps where it was taken: its own start is added by the handler.
			const raw = drag.part === "whole" ? found.position - drag.offset : found.position;
			const reason = handlers.drag(snapPosition(raw, event));
			hint.hidden = reason === null;
			if (reason !== null) {
				hint.textContent = reason;
				const box = host.getBoundingClientRect();
				hint.style.transform = `translate(${event.clientX - box.left + 12}px, ${event.clientY - box.top + host.scrollTop + 16}px)`;
			}
		},
		{ signal },
	);
	host.addEventListener("pointerup", () => finish(true), { signal });
	host.addEventListener("pointercancel", () => finish(false), { signal });
	window.addEventListener("keydown", (event) => event.key === "Escape" && drag?.begun && finish(false), { signal });
	host.addEventListener(
		"wheel",
		(event) => {
			if (!event.ctrlKey && !event.metaKey) return;
			event.preventDefault();
			const found = under(event.clientX, event.clientY);
			if (found) handlers.zoom(Math.exp(event.deltaY * 0.004), found.position);
		},
		{ signal, passive: false },
	);
	return ending;
}
