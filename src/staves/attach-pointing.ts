import type { BeatMap } from "../core/show/index.ts";
import { type DragPart, snapPosition, targetAt } from "./pointing.ts";
import type { StaveRow } from "./stave-row.ts";
import type { StavesHandlers } from "./staves.ts";

/** What a pointer event is over: a line, the position in beats, and CSS pixels from its body's corner. */
interface Found {
	readonly row: StaveRow;
	readonly position: number;
	readonly x: number;
	readonly y: number;
}

interface Pointing {
	readonly host: HTMLElement;
	/** The line under a place on the screen; outside all lines, the nearest. */
	readonly under: (x: number, y: number) => Found | null;
	readonly handlers: StavesHandlers;
	/** Says at the pointer what a drag does, or why it stops. */
	readonly hint: HTMLElement;
	/** While a beat is dragged the music keeps still under it. */
	readonly freeze: (on: boolean) => void;
	readonly beatMap: () => BeatMap;
}

type Drag =
	| { kind: "cue"; id: string; part: DragPart; offset: number; begun: boolean; x: number }
	| { kind: "beat"; beat: number; begun: boolean; x: number };

/** CSS pixels that the pointer moves before a press becomes a drag. */
const SLACK = 4;

/** Pointer on the staves: select, drag with snapping, seek and scrub, zoom. Ends with the returned controller. */
export function attachPointing({ host, under, handlers, hint, freeze, beatMap }: Pointing): AbortController {
	const ending = new AbortController();
	const { signal } = ending;
	let drag: Drag | null = null;
	let scrubbing = false;

	const finish = (keep: boolean) => {
		const ended = drag;
		drag = null;
		scrubbing = false;
		hint.hidden = true;
		if (!ended?.begun) return;
		if (ended.kind === "cue") handlers.endDrag(keep);
		else {
			handlers.endBeatDrag(keep);
			freeze(false);
		}
	};
	const say = (text: string | null, event: PointerEvent, isTrouble: boolean) => {
		hint.hidden = text === null;
		if (text === null) return;
		hint.textContent = text;
		hint.dataset.kind = isTrouble ? "trouble" : "plain";
		const box = host.getBoundingClientRect();
		hint.style.transform = `translate(${event.clientX - box.left + 12}px, ${event.clientY - box.top + host.scrollTop + 16}px)`;
	};
	const begin = (one: Drag): boolean => {
		if (one.kind === "cue") return handlers.beginDrag(one.id, one.part);
		if (!handlers.beginBeatDrag(one.beat)) return false;
		freeze(true);
		return true;
	};
	const move = (one: Drag, found: Found, event: PointerEvent) => {
		if (one.kind === "beat") {
			say(handlers.dragBeat(beatMap().secondsAt(found.position), event.altKey), event, false);
			return;
		}
		// An edge goes to the pointer; a whole cue keeps where it was taken: its own start is added by the handler.
		const raw = one.part === "whole" ? found.position - one.offset : found.position;
		const to = snapPosition(raw, event);
		const reason = handlers.drag(to);
		const moment = one.part === "whole" ? undefined : momentAt(found, to);
		say(reason ?? (moment ? `at the ${moment}` : null), event, reason !== null);
	};

	host.addEventListener(
		"pointerdown",
		(event) => {
			const found = event.button === 0 ? under(event.clientX, event.clientY) : null;
			if (!found?.row.picture || !(event.target instanceof Node) || !found.row.body.contains(event.target)) return;
			const target = targetAt(found.row.picture, found.x, found.y);
			host.setPointerCapture(event.pointerId);
			const x = event.clientX;
			if (target.kind === "cue") {
				handlers.selectCue(target.id, event.shiftKey || event.ctrlKey || event.metaKey);
				drag = { kind: "cue", id: target.id, part: target.part, offset: found.position, begun: false, x };
				return;
			}
			handlers.selectCue(null, false);
			handlers.seek(beatMap().secondsAt(target.kind === "beat" ? target.beat : found.position));
			if (target.kind === "beat") drag = { kind: "beat", beat: target.beat, begun: false, x };
			else scrubbing = true;
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
				host.dataset.over = target.kind === "cue" && target.part !== "whole" ? "edge" : target.kind;
				return;
			}
			if (!drag.begun) {
				if (Math.abs(event.clientX - drag.x) < SLACK) return;
				drag.begun = begin(drag);
				if (!drag.begun) return finish(false);
			}
			move(drag, found, event);
		},
		{ signal },
	);
	host.addEventListener("pointerup", () => finish(true), { signal });
	host.addEventListener("pointercancel", () => finish(false), { signal });
	host.addEventListener(
		"dblclick",
		(event) => {
			const found = under(event.clientX, event.clientY);
			const picture = found?.row.picture;
			if (!found || !picture || found.y < picture.lanes.ticks - 8 || found.y >= picture.lanes.ticks + 6) return;
			if (targetAt(picture, found.x, found.y).kind === "music") handlers.insertBeat(Math.floor(found.position));
		},
		{ signal },
	);
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

/** The moment of the music that a position is on. */
function momentAt({ row }: Found, position: number): string | undefined {
	return row.picture?.moments.find((moment) => Math.abs(moment.at - position) < 0.02)?.kind;
}
