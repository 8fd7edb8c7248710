/** Corrections of an edit map by hand: the edge of a stretch dragged to where the joint is. */
import { StarstaveError } from "../units/index.ts";
import { mapOfCarried } from "./assemble-map.ts";
import { type EditMap, isCarried, type Joint, oldTimeIn, type Stretch } from "./edit-map.ts";

/** Seconds: a stretch is never made shorter than this. */
const SHORTEST = 0.1;

/**
 * Moves one edge of a carried stretch along its own line. A neighbour that touches it gives way or follows, as far as
 * its own music goes; what no stretch covers afterwards is cut or inserted.
 * @param index of the stretch in `map.stretches`
 * @param edge its start or its end
 * @param newTime new seconds that the edge is dragged to; held within the soundtracks and the neighbours
 * @throws StarstaveError where the stretch carries no old music
 */
export function moveEdge(map: EditMap, index: number, edge: "start" | "end", newTime: number): EditMap {
	const stretch = map.stretches[index];
	if (stretch === undefined || !isCarried(stretch)) {
		throw new StarstaveError(
			"soundtrack",
			`Stretch ${index} of the edit map carries no old music; only edges of kept or stretched music can be moved.`,
		);
	}
	const carried = map.stretches.filter(isCarried);
	const at = carried.indexOf(stretch);
	const before = carried[at - 1];
	const after = carried[at + 1];
	const rate = stretch.rate ?? 1;
	// The line can't be followed past either soundtrack's ends.
	const earliest = Math.max(0, stretch.new[0] - stretch.old[0] / rate);
	const latest = Math.min(map.newDuration, stretch.new[1] + (map.oldDuration - stretch.old[1]) / rate);
	const next = [...carried];
	let to: number;
	if (edge === "start") {
		const least = before === undefined ? earliest : Math.max(earliest, before.new[0] + SHORTEST);
		to = Math.min(stretch.new[1] - SHORTEST, Math.max(least, newTime));
		next[at] = withEdges(stretch, to, stretch.new[1]);
		if (before !== undefined && (before.new[1] > to || touches(before.new[1], stretch.new[0]))) {
			next[at - 1] = withEdges(before, before.new[0], Math.min(to, reachOf(map, before)));
		}
	} else {
		const most = after === undefined ? latest : Math.min(latest, after.new[1] - SHORTEST);
		to = Math.max(stretch.new[0] + SHORTEST, Math.min(most, newTime));
		next[at] = withEdges(stretch, stretch.new[0], to);
		if (after !== undefined && (after.new[0] < to || touches(after.new[0], stretch.new[1]))) {
			next[at + 1] = withEdges(after, Math.max(to, startOf(after)), after.new[1]);
		}
	}
	const from = edge === "start" ? stretch.new[0] : stretch.new[1];
	const joints: Joint[] = map.joints.filter((joint) => !touches(joint.at, from) && !touches(joint.at, to));
	// What a person set is not in doubt.
	joints.push({ at: to, spread: 0, ambiguous: null });
	joints.sort((a, b) => a.at - b.at);
	return mapOfCarried(map, map.verdict === "same" ? "edited" : map.verdict, next, joints, map.notes);
}

const touches = (a: number, b: number): boolean => Math.abs(a - b) < 1e-4;

/** The last new second that a stretch's line can be followed to. */
function reachOf(map: EditMap, stretch: Stretch): number {
	return Math.min(map.newDuration, stretch.new[1] + (map.oldDuration - stretch.old[1]) / (stretch.rate ?? 1));
}

/** The first new second of a stretch's line. */
function startOf(stretch: Stretch): number {
	return Math.max(0, stretch.new[0] - stretch.old[0] / (stretch.rate ?? 1));
}

function withEdges(stretch: Stretch, from: number, to: number): Stretch {
	return { ...stretch, new: [from, to], old: [oldTimeIn(stretch, from), oldTimeIn(stretch, to)] };
}
