/**
 * Remedies of a formation in which the fleet can't stand: its slots nearer than the spacing, or outside the venue. Each
 * is laid out with its reserve slots and checked as the show's check does it; what becomes of the flights to and from it
 * is planned and said.
 */
import { fillFleet, moveIntoVenue, partSlots, shareThatFits, slotsOf } from "../../formation/index.ts";
import { smallestGap } from "../../maths/index.ts";
import type { FleetSlots, Formation, NewFormation } from "../../show/index.ts";
import { SPACING_HAIR } from "../../units/index.ts";
import { checkSlots } from "../show/check-slots.ts";
import { changePlace, middleOf, nameOf } from "./ends.ts";
import { bestFirst, type Remedy, type RemedyStep } from "./remedy.ts";
import type { Found } from "./reshape.ts";
import { isRefused, type TrialBase, tryOut } from "./trial.ts";
import { extentOf, sayMove } from "./ways.ts";

/** A change that may mend the formation, before it is tried. */
interface Draft extends Pick<Remedy, "kind" | "change" | "cost" | "loss"> {
	readonly to: Partial<Omit<NewFormation, "id">>;
}

/**
 * @param base the show as it was checked; its formation `id` doesn't keep spacing or venue
 * @returns none where it stands as it is, or where nothing mends it; best first
 */
export function mendFormation(base: TrialBase, id: string): Found[] {
	const { show } = base;
	const formation: Formation | undefined = show.formations.byId[id];
	const slots = base.slots.get(id);
	if (formation === undefined || slots === undefined) return [];
	if (checkSlots(slots.all, show.fleet.limits, show.venue).verdicts.includes("flies")) return [];
	const found: Found[] = [];
	for (const draft of [
		...sized(base, formation, slots),
		...parted(base, formation, slots),
		...brought(base, formation, slots),
	]) {
		const { to, ...words } = draft;
		const changed = { ...formation, ...to } as Formation;
		const laid = fillFleet(slotsOf(changed, show.fleet.limits.downwash), show.fleet, show.venue);
		if (!checkSlots(laid.all, show.fleet.limits, show.venue).verdicts.includes("flies")) continue;
		const steps: RemedyStep[] = [{ do: "change-formation", id, change: to }];
		const { words: flights, plans } = flightsAfter(base, steps);
		const remedy: Remedy = {
			...words,
			cost: `${words.cost} ${flights}`.trim(),
			steps,
			ghost: laid.positions.slice(),
		};
		found.push({ remedy, plans });
	}
	const order = bestFirst(found.map(({ remedy }) => remedy));
	return found.sort((a, b) => order.indexOf(a.remedy) - order.indexOf(b.remedy));
}

/** The smallest size at which the slots keep spacing. */
function sized({ show }: TrialBase, formation: Formation, slots: FleetSlots): Draft[] {
	const { limits } = show.fleet;
	const gap = smallestGap(slots.positions, limits.downwash).distance;
	if (!(gap > 0) || gap >= limits.spacing) return [];
	const scale = Math.ceil((1000 * (limits.spacing + SPACING_HAIR)) / gap) / 1000;
	const place = changePlace(formation.place, middleOf(slots), { scale });
	const grown = slotsOf({ ...formation, place }, limits.downwash);
	const move = moveIntoVenue(grown.positions, show.venue);
	const span = extentOf(slots);
	const moves = move !== null && Math.hypot(...move) > 0;
	return [
		{
			kind: "enlarge",
			change: `Enlarge ${nameOf(show, formation.id)} to ${percentOf(scale)}${moves ? `, and bring it ${sayMove(move)}` : ""}.`,
			cost: `The picture is ${(span * scale).toFixed(1)} m instead of ${span.toFixed(1)} m across.`,
			loss: 0.05 + Math.min(0.5, (scale - 1) * 0.3),
			to: { place: moves ? changePlace(place, middleOf(grown), { move }) : place },
		},
	];
}

/** Slots pushed apart where they stand too near; the shape becomes points. */
function parted({ show }: TrialBase, formation: Formation, slots: FleetSlots): Draft[] {
	const { limits } = show.fleet;
	if (smallestGap(slots.positions, limits.downwash).distance >= limits.spacing) return [];
	const apart = partSlots(slots.positions, limits);
	if (apart === null) return [];
	const middle = middleOf(slots).map((value) => Math.round(value * 1000) / 1000) as [number, number, number];
	const at = (k: number): number => Math.round((apart.positions[k] - middle[k % 3]) * 1000) / 1000;
	const points = Array.from({ length: slots.count }, (_, i): [number, number, number] => [
		at(3 * i),
		at(3 * i + 1),
		at(3 * i + 2),
	]);
	const groups = [...slots.groups].map(([name, members]): [string, number[]] => [name, Array.from(members)]);
	const moved = countMoved(apart.positions, slots.positions);
	const kept =
		formation.shape.kind === "points"
			? ""
			: ` It becomes points, so that its ${formation.shape.kind} can't be changed as such afterwards.`;
	return [
		{
			kind: "part-slots",
			change: `Push apart the slots of ${nameOf(show, formation.id)} that stand too near.`,
			cost: `${moved} of ${slots.count} slots move, by ${apart.furthest.toFixed(2)} m at most; the picture is ${extentOf(apart).toFixed(1)} m instead of ${extentOf(slots).toFixed(1)} m across.${kept}`,
			loss: 0.1 + Math.min(0.5, apart.furthest / Math.max(1, extentOf(slots))) + (kept === "" ? 0 : 0.05),
			to: {
				shape: { kind: "points", points },
				place: { position: middle, turn: 0, tilt: 0, scale: 1 },
				colours: slots.colours === null ? undefined : hexOf(slots.colours),
				groups: groups.length === 0 ? undefined : Object.fromEntries(groups),
			},
		},
	];
}

/** Into the flight volume and out of what is blocked: moved, and made smaller where it is too large. */
function brought({ show }: TrialBase, formation: Formation, slots: FleetSlots): Draft[] {
	const name = nameOf(show, formation.id);
	const middle = middleOf(slots);
	const drafts: Draft[] = [];
	const move = moveIntoVenue(slots.positions, show.venue);
	if (move !== null && Math.hypot(...move) > 0) {
		drafts.push({
			kind: "bring-in",
			change: `Move ${name} ${sayMove(move)}.`,
			cost: "It then stands inside the flight volume, clear of what is blocked.",
			loss: 0.05 + Math.min(0.4, Math.hypot(...move) / 100),
			to: { place: changePlace(formation.place, middle, { move }) },
		});
	}
	const share = shareThatFits(slots.positions, show.venue);
	const span = extentOf(slots);
	// Whole percents, and half of that again where the volume is full of what is blocked.
	for (const scale of share < 1 ? [Math.floor(100 * share) / 100] : [0.9, 0.75, 0.5]) {
		if (move !== null && share === 1) break;
		const place = changePlace(formation.place, middle, { scale });
		const smaller = slotsOf({ ...formation, place }, show.fleet.limits.downwash);
		const then = moveIntoVenue(smaller.positions, show.venue);
		if (then === null) continue;
		const moves = Math.hypot(...then) > 0;
		drafts.push({
			kind: "shrink-in",
			change: `Shrink ${name} to ${percentOf(scale)}${moves ? `, and bring it ${sayMove(then)}` : ""}.`,
			cost: `The picture is ${(span * scale).toFixed(1)} m instead of ${span.toFixed(1)} m across.`,
			loss: 0.1 + (1 - scale),
			to: { place: moves ? changePlace(place, middle, { move: then }) : place },
		});
	}
	return drafts;
}

/** What becomes of the flights to and from it, in words; a flight that flew and no longer does is named. */
function flightsAfter(base: TrialBase, steps: readonly RemedyStep[]): { words: string; plans: Found["plans"] } {
	const trial = tryOut(base, steps, []);
	if (isRefused(trial)) {
		const cue = base.show.cues.byId[trial.refused?.problem.id ?? ""];
		const which = cue === undefined ? (trial.refused?.problem.id ?? "endurance") : `cue ${cue.number}`;
		return { words: `Then ${which} no longer flies: see Verdicts.`, plans: new Map() };
	}
	const short: string[] = [];
	for (const [id, { flies }] of trial.outcomes) {
		const cue = base.show.cues.byId[id];
		if (!flies) short.push(cue === undefined ? id : `cue ${cue.number}`);
	}
	if (short.length > 0) return { words: `Still to be mended then: ${short.join(", ")}.`, plans: trial.plans };
	return { words: trial.outcomes.size > 0 ? "All flights to and from it fly." : "", plans: trial.plans };
}

function percentOf(scale: number): string {
	return `${(100 * scale).toFixed(scale * 100 === Math.round(scale * 100) ? 0 : 1)} %`;
}

function countMoved(after: Float64Array, before: Float64Array): number {
	let moved = 0;
	for (let k = 0; k < after.length; k += 3) {
		if ([0, 1, 2].some((axis) => Math.abs(after[k + axis] - before[k + axis]) > 1e-6)) moved++;
	}
	return moved;
}

function hexOf(colours: Uint8Array): string[] {
	return Array.from(
		{ length: colours.length / 3 },
		(_, i) => `#${[0, 1, 2].map((channel) => colours[3 * i + channel].toString(16).padStart(2, "0")).join("")}`,
	);
}
