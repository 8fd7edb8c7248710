import { boxOf } from "../../formation/index.ts";
import { createBeatMap, type FleetSlots, newId, type Place, type Show, transitionsInTime } from "../../show/index.ts";
import { openingOf } from "../show/leg-problems.ts";
import type { RemedyStep } from "./remedy.ts";

/** One of the two pictures that a transition flies between. */
export interface End {
	readonly which: "from" | "to";
	/** The formation's id, and its name as people read it. */
	readonly formation: string;
	readonly name: string;
	/** How many other times the show stands in this formation. */
	readonly elsewhere: number;
	/** The cue that brings the fleet into it here; null: it is the opening. */
	readonly cue: string | null;
}

/** Both ends of a transition; null where the show holds no such cue. */
export function endsOf(show: Show, id: string): { readonly from: End; readonly to: End } | null {
	const timed = transitionsInTime(show, createBeatMap(show.grid));
	const index = timed.findIndex((cue) => cue.id === id);
	const opening = openingOf(show);
	if (index < 0 || opening === null) return null;
	const endOf = (which: End["which"], k: number): End => {
		const formation = k < 0 ? opening : timed[k].formation;
		const times = timed.filter((cue) => cue.formation === formation).length + (opening === formation ? 1 : 0);
		return {
			which,
			formation,
			name: nameOf(show, formation),
			elsewhere: times - 1,
			cue: k < 0 ? null : timed[k].id,
		};
	};
	return { from: endOf("from", index - 1), to: endOf("to", index) };
}

export function nameOf(show: Show, formation: string): string {
	return show.formations.byId[formation]?.name || formation;
}

/**
 * Puts one end elsewhere. Where the show stands in that formation at other times too, a copy is made for this time
 * alone, so that no other picture changes.
 * @returns the steps, and the id of the formation that the end then is
 */
export function placeEnd(show: Show, end: End, place: Place): { readonly steps: RemedyStep[]; readonly id: string } {
	if (end.elsewhere === 0) {
		return { steps: [{ do: "change-formation", id: end.formation, change: { place } }], id: end.formation };
	}
	const id = newId("f", show.formations.order);
	const steps: RemedyStep[] = [
		{ do: "copy-formation", of: end.formation, id, change: { place, name: `${end.name} 2` } },
	];
	if (end.cue === null) steps.push({ do: "set-opening", id });
	else steps.push({ do: "change-cue", id: end.cue, change: { formation: id } });
	return { steps, id };
}

/** Middle of the box about the lit slots, m. */
export function middleOf({ positions }: Pick<FleetSlots, "positions">): [number, number, number] {
	const { min, max } = boxOf(positions);
	return [0, 1, 2].map((axis) => (min[axis] + max[axis]) / 2) as [number, number, number];
}

/** A place scaled, turned about z and moved, all about a middle that stays where it is but for the move. */
export function changePlace(
	place: Place,
	middle: readonly number[],
	change: { readonly scale?: number; readonly turn?: number; readonly move?: readonly number[] },
): Place {
	const { scale = 1, turn = 0, move = [0, 0, 0] } = change;
	const radians = (turn * Math.PI) / 180;
	const [x, y, z] = [0, 1, 2].map((axis) => (place.position[axis] - middle[axis]) * scale);
	const turned = [x * Math.cos(radians) - y * Math.sin(radians), x * Math.sin(radians) + y * Math.cos(radians), z];
	const tidy = (value: number): number => Math.round(value * 1000) / 1000 + 0;
	return {
		...place,
		position: [0, 1, 2].map((axis) => tidy(middle[axis] + turned[axis] + move[axis])) as [number, number, number],
		scale: Math.round(place.scale * scale * 1e6) / 1e6,
		turn: tidy(place.turn + turn),
	};
}
