/**
 * Remedies that change one of the two pictures: made smaller or larger, brought nearer, turned. How much is first told
 * by the straight-line bound under the exact assignment, which costs next to nothing; only what promises to suffice is
 * planned and proven.
 */
import { fillFleet, slotsOf } from "../../formation/index.ts";
import { smallestGap } from "../../maths/index.ts";
import type { FleetSlots, Formation, Limits, Place } from "../../show/index.ts";
import { SPACING_HAIR } from "../../units/index.ts";
import { assign } from "../assign/assign.ts";
import type { TransitionCheck } from "../check.ts";
import { straightTime } from "../law/straight-time.ts";
import { scaledMillimetres } from "../measure.ts";
import { changePlace, type End, endsOf, middleOf, placeEnd } from "./ends.ts";
import type { Remedy, RemedyStep } from "./remedy.ts";
import { sayOthers, sayTime } from "./say-cost.ts";
import { isRefused, type Trial, type TrialBase, tryOut } from "./trial.ts";

/** A remedy with the plans that were made for it. */
export interface Found {
	readonly remedy: Remedy;
	readonly plans: Trial["plans"];
}

export type Reshaping = "shrink" | "spread" | "nearer" | "turn";

/** Plans that are made before a way is given up. */
const MOST_PLANS = 3;
/** Steps between nothing and the most, in which a size or a way is looked for. */
const STEPS = 16;
/** The bound has to leave this share of the time over, since plans are a little longer. */
const MARGIN = 0.99;
const MOST_TURN = 90;
/** Likewise of a picture that is read: turned further, nobody can. */
const MOST_TURN_READ = 30;
const LARGEST = 1.6;
const SMALLEST = 0.5;

/** One way of changing an end, by how much: 0 nothing, 1 the most. */
interface Way {
	readonly kind: Reshaping;
	readonly end: End;
	/** Place at `amount`, and what it is in words; the amounts are rounded to what people would choose. */
	at(amount: number): { readonly place: Place; readonly change: string; readonly loss: number; readonly cost: string };
	readonly steps: number;
}

/**
 * @param check the transition that doesn't fly, as it was checked
 * @returns at most one remedy for each end
 */
export function reshape(base: TrialBase, check: TransitionCheck, kind: Reshaping): Found[] {
	const ends = endsOf(base.show, check.id);
	if (ends === null || base.show.fleet.count === 0) return [];
	const found: Found[] = [];
	for (const end of [ends.to, ends.from]) {
		const other = end.which === "to" ? ends.from : ends.to;
		for (const way of waysOf(base, kind, end, other)) {
			const remedy = follow(base, check, way, other);
			if (remedy !== null) {
				found.push(remedy);
				break;
			}
		}
	}
	return found;
}

/** The least amount that the bound says is enough, planned and proven; more where the plan comes out longer. */
function follow(base: TrialBase, check: TransitionCheck, way: Way, other: End): Found | null {
	const { show, slots } = base;
	const formation = show.formations.byId[way.end.formation];
	const still = slots.get(other.formation);
	const own = slots.get(way.end.formation);
	if (still === undefined || own === undefined) return null;
	const { limits } = show.fleet;
	const boundAt = (moved: FleetSlots): number =>
		way.end.which === "to" ? straightBound(still.all, moved.all, limits) : straightBound(moved.all, still.all, limits);
	const bound = boundAt(own);
	// How much longer the plan is than the bound, which a new plan likely is too.
	let longer = check.needed === null || bound <= 0 ? 1 : Math.max(1, check.needed / bound);
	let plans = 0;
	// Where no time is enough, the bound says nothing: a few amounts are planned.
	const stride = check.needed === null ? Math.max(1, Math.ceil(way.steps / MOST_PLANS)) : 1;
	for (let k = stride; k <= way.steps && plans < MOST_PLANS; k += stride) {
		const { place } = way.at(k / way.steps);
		const moved = fillAt(base, formation, place);
		const promised = boundAt(moved);
		const bends = way.kind === "spread" ? bendsLeft(moved, still, limits) : 1;
		if (check.needed !== null && promised * (1 + (longer - 1) * bends) > check.available * MARGIN) continue;
		plans++;
		const { steps } = placeEnd(show, way.end, place);
		const trial = tryOut(base, steps, [check.id]);
		if (isRefused(trial)) {
			const { refused } = trial;
			if (refused?.problem.id === check.id && refused.needed > check.available && promised > 0) {
				longer = Math.max(longer, 1 + (refused.needed / promised - 1) / Math.max(0.25, bends));
			}
			continue;
		}
		// The plan may come out shorter than was feared: then less is enough.
		const less =
			k > 1 && plans < MOST_PLANS && hasRoom(trial, check) ? tryLess(base, check, way, k, MOST_PLANS - plans) : null;
		return less ?? toFound(base, check, way, way.at(k / way.steps), steps, trial, moved.positions);
	}
	return null;
}

/** Whether more time is left over than makes it comfortable. */
function hasRoom(trial: Trial, check: TransitionCheck): boolean {
	const own = trial.outcomes.get(check.id);
	return own !== undefined && own.needed < 0.95 * check.available;
}

/** A step less at a time, as long as it flies. */
function tryLess(base: TrialBase, check: TransitionCheck, way: Way, from: number, most: number): Found | null {
	let best: Found | null = null;
	for (let k = from - 1; k >= 1 && from - k <= most; k--) {
		const amount = way.at(k / way.steps);
		const { steps } = placeEnd(base.show, way.end, amount.place);
		const trial = tryOut(base, steps, [check.id]);
		if (isRefused(trial)) break;
		const moved = fillAt(base, base.show.formations.byId[way.end.formation], amount.place);
		best = toFound(base, check, way, amount, steps, trial, moved.positions);
	}
	return best;
}

function toFound(
	base: TrialBase,
	check: TransitionCheck,
	way: Way,
	{ change, loss, cost }: ReturnType<Way["at"]>,
	steps: readonly RemedyStep[],
	trial: Trial,
	ghost: Float64Array,
): Found {
	const parts = [cost, sayOthers(way.end), sayTime(base, trial, check)].filter((part) => part !== "");
	const kind = `${way.kind}-${way.end.which}`;
	return { remedy: { kind, change, cost: parts.join(" "), loss, steps, ghost: ghost.slice() }, plans: trial.plans };
}

/**
 * How much of the bends two pictures still ask for: all where one stands at the spacing, none where both stand √2 times
 * as far apart (Turpin, Michael & Kumar, IJRR 2014).
 */
function bendsLeft(one: FleetSlots, other: FleetSlots, { spacing, downwash }: Limits): number {
	const gap = Math.min(smallestGap(one.all, downwash).distance, smallestGap(other.all, downwash).distance);
	return Math.min(1, Math.max(0, (Math.SQRT2 - gap / spacing) / (Math.SQRT2 - 1)));
}

function fillAt({ show }: TrialBase, formation: Formation, place: Place): FleetSlots {
	return fillFleet(slotsOf({ ...formation, place }, show.fleet.limits.downwash), show.fleet, show.venue);
}

/** Seconds: the longest straight flight of the exact assignment. */
export function straightBound(from: Float64Array, to: Float64Array, limits: Limits): number {
	const solved = assign(scaledMillimetres(from, limits.downwash), scaledMillimetres(to, limits.downwash));
	let longest = 0;
	solved?.target.forEach((slot, i) => {
		const [a, b] = [3 * i, 3 * slot];
		longest = Math.max(
			longest,
			straightTime(to[b] - from[a], to[b + 1] - from[a + 1], to[b + 2] - from[a + 2], limits),
		);
	});
	return longest;
}

function waysOf(base: TrialBase, kind: Reshaping, end: End, other: End): Way[] {
	const own = base.slots.get(end.formation);
	const there = base.slots.get(other.formation);
	if (own === undefined || there === undefined || own.count === 0) return [];
	const { place } = base.show.formations.byId[end.formation];
	const middle = middleOf(own);
	if (kind === "shrink" || kind === "spread") return sizeWay(base, kind, end, own, place, middle);
	if (kind === "nearer") {
		const towards = middleOf(there);
		const way = [0, 1, 2].map((axis) => towards[axis] - middle[axis]);
		const distance = Math.hypot(way[0], way[1], way[2]);
		if (distance < 1) return [];
		const size = Math.max(1, extentOf(own));
		return [
			{
				kind,
				end,
				steps: STEPS,
				at: (amount) => {
					const metres = Math.max(0.5, Math.round(2 * amount * distance) / 2);
					const move = way.map((value) => (value * metres) / distance);
					return {
						place: changePlace(place, middle, { move }),
						change: `Bring ${end.name} ${metres} m nearer to ${other.name}.`,
						cost: `The picture stands ${sayMove(move)}.`,
						loss: 0.15 + Math.min(0.5, (0.4 * metres) / size),
					};
				},
			},
		];
	}
	const { shape } = base.show.formations.byId[end.formation];
	const most = shape.kind === "text" || shape.kind === "drawing" ? MOST_TURN_READ : MOST_TURN;
	const step = own.count > 500 ? 15 : 5;
	return [
		{
			kind,
			end,
			// To either side in turn, so that the smallest turn is found first.
			steps: (2 * most) / step,
			at: (amount) => {
				const k = Math.round((amount * 2 * most) / step);
				const size = Math.ceil(k / 2) * step;
				const turn = k % 2 === 1 ? size : -size;
				return {
					place: changePlace(place, middle, { turn }),
					change: `Turn ${end.name} by ${size}° about the upright, ${turn > 0 ? "anticlockwise" : "clockwise"} from above.`,
					cost: `The audience sees it from another side: ${size}° off how it was drawn.`,
					loss: 0.15 + size / 100,
				};
			},
		},
	];
}

function sizeWay(
	base: TrialBase,
	kind: "shrink" | "spread",
	end: End,
	own: FleetSlots,
	place: Place,
	middle: readonly number[],
): Way[] {
	const { limits } = base.show.fleet;
	const gap = smallestGap(own.positions, limits.downwash).distance;
	// The smallest that keeps spacing; a picture of one slot has no size.
	const least = Number.isFinite(gap) && gap > 0 ? Math.max(SMALLEST, (limits.spacing + SPACING_HAIR) / gap) : 1;
	const [first, last] = kind === "shrink" ? [99, Math.ceil(100 * least)] : [102, 100 * LARGEST];
	if (kind === "shrink" && last > first) return [];
	const span = extentOf(own);
	return [
		{
			kind,
			end,
			steps: Math.min(STEPS, Math.abs(last - first) + 1),
			at: (amount) => {
				const percent = Math.round(first + (last - first) * amount);
				const scale = percent / 100;
				return {
					place: changePlace(place, middle, { scale }),
					change: `${kind === "shrink" ? "Shrink" : "Spread"} ${end.name} to ${percent} %.`,
					cost: `The picture is ${(span * scale).toFixed(1)} m instead of ${span.toFixed(1)} m across.`,
					loss: 0.08 + Math.abs(1 - scale) * (kind === "shrink" ? 1 : 0.8),
				};
			},
		},
	];
}

/** Largest side of the box about the lit slots, m. */
export function extentOf({ positions }: Pick<FleetSlots, "positions">): number {
	let widest = 0;
	for (let axis = 0; axis < 3; axis++) {
		let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
		for (let k = axis; k < positions.length; k += 3) {
			low = Math.min(low, positions[k]);
			high = Math.max(high, positions[k]);
		}
		widest = Math.max(widest, high - low);
	}
	return widest;
}

/** "3 m further right and 2 m lower" */
export function sayMove(move: readonly number[]): string {
	const words = [
		["further right", "further left"],
		["further back", "nearer to the audience"],
		["higher", "lower"],
	];
	const parts = move.flatMap((value, axis) =>
		Math.abs(value) < 0.05 ? [] : [`${Math.abs(value).toFixed(1)} m ${words[axis][value > 0 ? 0 : 1]}`],
	);
	return parts.length > 1 ? `${parts.slice(0, -1).join(", ")} and ${parts.at(-1)}` : (parts[0] ?? "where it stood");
}
