import { nearestOnset } from "../core/music/index.ts";
import {
	applyEdit,
	changeCue,
	createBeatMap,
	cuePosition,
	type DraftShow,
	type EditResult,
	find,
	moveBeat,
	moveCues,
	type Show,
	type TransitionCue,
	transitionsInTime,
} from "../core/show/index.ts";
import { StarstaveError } from "../core/units/index.ts";
import type { BeatDrag, CueDrag, Drag } from "./commands/command-types.ts";
import type { Workbench } from "./workbench.ts";

/** Begins a drag: one step of undo, whatever happens on the way. Null where edits are refused. */
export function beginDrag(bench: Workbench, name: string): Drag | null {
	bench.endDrag();
	if (!bench.mayEdit()) return null;
	const { store, history, feasibility } = bench;
	const before = store.getState().show!;
	let result: EditResult | null = null;
	let over = false;

	const end = (): boolean => {
		const first = !over;
		over = true;
		bench.endDrag = () => {};
		return first;
	};
	const drag: Drag = {
		update: (edit) => {
			if (over) return "The drag is over.";
			try {
				result = applyEdit(before, edit);
			} catch (error) {
				if (error instanceof StarstaveError) return error.message;
				throw error;
			}
			store.setState({ show: result.show });
			feasibility.follow();
			return null;
		},
		commit: () => {
			if (!end() || result === null) return;
			if (result.patches.length > 0) {
				history.push(name, result);
				store.setState({ unsaved: true });
			}
			bench.showChanged({ keep: result.patches.length > 0 });
		},
		cancel: () => {
			if (!end() || result === null) return;
			store.setState({ show: before });
			bench.showChanged({ keep: false });
		},
	};
	bench.endDrag = drag.commit;
	return drag;
}

/** Shortest transition that a drag leaves, in beats; what is shorter is typed in. */
const SHORTEST = 0.25;

/** Begins the drag of one cue, as `CueDrag` has it. */
export function beginCueDrag(bench: Workbench, id: string, part: "departs" | "arrives" | "whole"): CueDrag | null {
	const { show, selection } = bench.store.getState();
	const cue = show === null ? undefined : find(show.cues, id);
	if (show === null || cue === undefined) return null;
	if (part !== "whole" && cue.kind !== "transition") return null;
	// A cue that is part of the selection takes the whole selection with it.
	const together = selection.kind === "cues" && selection.ids.includes(id) ? selection.ids : [id];
	const ids = part === "whole" ? together : [id];
	const name =
		part === "departs"
			? `Move departure of cue ${cue.number}`
			: part === "arrives"
				? `Move arrival of cue ${cue.number}`
				: ids.length === 1
					? `Move cue ${cue.number}`
					: `Move ${ids.length} cues`;
	const drag = beginDrag(bench, name);
	if (drag === null) return null;
	const bounds = boundsOf(show, ids, part);
	return {
		update: (beats) => {
			const { to, why } = hold(beats, bounds);
			const refused = drag.update((draft) => place(draft, ids, part, to));
			return refused ?? why;
		},
		commit: drag.commit,
		cancel: drag.cancel,
	};
}

function place(draft: DraftShow, ids: readonly string[], part: "departs" | "arrives" | "whole", beats: number): void {
	if (part === "whole") {
		moveCues(draft, ids, beats);
		return;
	}
	const cue = draft.cues.byId[ids[0]];
	const beatMap = createBeatMap(draft.grid);
	const at = cuePosition(cue, beatMap);
	if (part === "arrives") changeCue(draft, cue.id, { length: beats - at });
	else {
		const pinned = cue.pinned === undefined ? {} : { pinned: beatMap.secondsAt(beats) };
		changeCue(draft, cue.id, { at: beats, length: at + cue.length - beats, ...pinned });
	}
}

interface Bounds {
	readonly least: number;
	readonly most: number;
	readonly whyLeast: string;
	readonly whyMost: string;
}

function hold(beats: number, { least, most, whyLeast, whyMost }: Bounds): { to: number; why: string | null } {
	if (beats < least) return { to: least, why: whyLeast };
	if (beats > most) return { to: most, why: whyMost };
	return { to: beats, why: null };
}

/**
 * How far an edge or a cue may be taken: a transition departs no sooner than the one before it arrives, and arrives no
 * later than the next departs. For the whole the bounds are on how far it is moved. Where two transitions overlap
 * already, the drag may go on from where they stand but not deeper.
 */
function boundsOf(show: Show, ids: readonly string[], part: "departs" | "arrives" | "whole"): Bounds {
	const beatMap = createBeatMap(show.grid);
	const inTime = transitionsInTime(show, beatMap);
	const moved = new Set(ids);
	const departsAt = (cue: TransitionCue): number => cuePosition(cue, beatMap);
	const arrivesAt = (cue: TransitionCue): number => departsAt(cue) + cue.length;
	let bounds: Bounds = { least: Number.NEGATIVE_INFINITY, most: Number.POSITIVE_INFINITY, whyLeast: "", whyMost: "" };
	inTime.forEach((cue, index) => {
		if (!moved.has(cue.id)) return;
		const before = inTime.slice(0, index).findLast((other) => !moved.has(other.id));
		const after = inTime.slice(index + 1).find((other) => !moved.has(other.id));
		const whyLeast = before ? `Cue ${before.number} arrives here.` : "";
		const whyMost = after ? `Cue ${after.number} departs here.` : "";
		const least = before ? Math.min(arrivesAt(before), departsAt(cue)) : Number.NEGATIVE_INFINITY;
		const most = after ? Math.max(departsAt(after), arrivesAt(cue)) : Number.POSITIVE_INFINITY;
		const shortest = `A transition takes at least ${SHORTEST} beats.`;
		if (part === "departs") {
			bounds = { least, most: Math.max(arrivesAt(cue) - SHORTEST, departsAt(cue)), whyLeast, whyMost: shortest };
		} else if (part === "arrives") {
			bounds = { least: Math.min(departsAt(cue) + SHORTEST, arrivesAt(cue)), most, whyLeast: shortest, whyMost };
		} else {
			const [back, on] = [least - departsAt(cue), most - arrivesAt(cue)];
			bounds = {
				least: Math.max(bounds.least, back),
				whyLeast: back > bounds.least ? whyLeast : bounds.whyLeast,
				most: Math.min(bounds.most, on),
				whyMost: on < bounds.most ? whyMost : bounds.whyMost,
			};
		}
	});
	return bounds;
}

/** Seconds on either side of the pointer in which a beat finds an onset. */
const ONSET_REACH = 0.03;

/** Begins the drag of one beat, as `BeatDrag` has it. */
export function beginBeatDrag(bench: Workbench, beat: number): BeatDrag | null {
	const { show, analysis } = bench.store.getState();
	const from = show?.grid.beats[beat];
	if (from === undefined) return null;
	const drag = beginDrag(bench, "Move a beat");
	if (drag === null) return null;
	return {
		update: (seconds, free) => {
			const onset = free || analysis === null ? null : nearestOnset(analysis.peaks, seconds, ONSET_REACH);
			const at = Math.round((onset ?? seconds) * 1000) / 1000;
			return drag.update((draft) => moveBeat(draft, beat, at)) ?? { at, moved: at - from };
		},
		commit: drag.commit,
		cancel: drag.cancel,
	};
}
