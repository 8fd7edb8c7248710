import { StarstaveError } from "../../units/index.ts";
import { requireDroneGroup, requireOpening } from "../check-references.ts";
import type { Fleet, Limits, Takeoff, Venue } from "../schema/fleet-venue.ts";
import { fleet, takeoff, venue } from "../schema/fleet-venue.ts";
import { type DroneGroup, group, type Soundtrack, soundtrack } from "../schema/show-file.ts";
import type { DraftShow } from "./apply-edit.ts";
import { checkCuesIn, checkKeyed, checkListed } from "./check-part.ts";

export function setTitle(draft: DraftShow, title: string): void {
	draft.title = title;
}

export function setNotes(draft: DraftShow, notes: string): void {
	draft.notes = notes;
}

/** Names the soundtrack, or takes it away with null. The grid stays: a new edit of the music is retimed, not swapped. */
export function setSoundtrack(draft: DraftShow, to: Soundtrack | null): void {
	draft.soundtrack = to === null ? null : checkKeyed(soundtrack, "soundtrack", to);
	checkCuesIn(draft);
}

/** Where the fleet waits, dark, when the music starts. */
export function setOpening(draft: DraftShow, formation: string | null): void {
	requireOpening(formation, draft.formations.order);
	draft.opening = formation;
}

/** Changes fields of the fleet. Groups lose the drones that a smaller fleet no longer has. */
export function setFleet(draft: DraftShow, change: Partial<Omit<Fleet, "limits">>): void {
	const next = checkKeyed(fleet, "fleet", { ...draft.fleet, ...change });
	draft.fleet = next;
	for (const id of draft.groups.order) {
		const held = draft.groups.byId[id];
		const kept = held.drones.filter((drone) => drone < next.count);
		if (kept.length < held.drones.length) held.drones = kept;
	}
}

/** Changes limits of the fleet: m/s, m/s², m/s³, m, share, s. */
export function setLimits(draft: DraftShow, change: Partial<Limits>): void {
	draft.fleet = checkKeyed(fleet, "fleet", { ...draft.fleet, limits: { ...draft.fleet.limits, ...change } });
}

/** Changes fields of the venue. The flight volume keeps its corners in order. */
export function setVenue(draft: DraftShow, change: Partial<Venue>): void {
	const next = checkKeyed(venue, "venue", { ...draft.venue, ...change });
	for (const { min, max } of [next.volume, ...next.blocked]) {
		for (let axis = 0; axis < 3; axis++) {
			if (min[axis] < max[axis]) continue;
			throw new StarstaveError(
				"show",
				`A volume of the venue runs from ${min[axis]} m to ${max[axis]} m ${["to the right", "away", "up"][axis]}, but its min must lie below its max.`,
			);
		}
	}
	draft.venue = next;
}

/** The take-off grid; null lets the tool lay one under the opening. */
export function setTakeoff(draft: DraftShow, to: Takeoff | null): void {
	draft.takeoff = to === null ? null : checkKeyed(takeoff, "takeoff", to);
}

/** Adds a group of drones, or replaces the one of its id. */
export function setDroneGroup(draft: DraftShow, to: DroneGroup): void {
	const next = checkListed(group, "groups", to);
	requireDroneGroup(next, draft.fleet.count);
	if (!Object.hasOwn(draft.groups.byId, next.id)) draft.groups.order.push(next.id);
	draft.groups.byId[next.id] = next;
}

export function removeDroneGroup(draft: DraftShow, id: string): void {
	if (!Object.hasOwn(draft.groups.byId, id)) {
		throw new StarstaveError("show", `The show has no group of drones with the id ${id}.`);
	}
	delete draft.groups.byId[id];
	draft.groups.order = draft.groups.order.filter((other) => other !== id);
}
