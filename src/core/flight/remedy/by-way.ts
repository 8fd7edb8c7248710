/**
 * Remedies that fly a transition in two or three: by way of a formation in between. Round a blocked volume the picture
 * is first brought beyond one of its faces (above, beside, before, behind), where straight flights can't meet it, and
 * comes down to its end from there. Where no plan parts the drones in one flight, the picture is first drawn apart, or
 * half of the fleet goes ahead.
 */
import { boxOf } from "../../formation/index.ts";
import { smallestGap } from "../../maths/index.ts";
import type { Box, FleetSlots, NewFormation, TransitionCue } from "../../show/index.ts";
import { applyEdit, newId } from "../../show/index.ts";
import { GAP_TOLERANCE, SPACING_HAIR } from "../../units/index.ts";
import { assign } from "../assign/assign.ts";
import type { TransitionCheck } from "../check.ts";
import { scaledMillimetres } from "../measure.ts";
import { straightPaths } from "../paths/polynomial-paths.ts";
import type { Plan } from "../plan.ts";
import { planLeg } from "../plan-leg.ts";
import { findBreach } from "../proof/venue.ts";
import { legProblems } from "../show/leg-problems.ts";
import { changePlace, type End, endsOf, middleOf } from "./ends.ts";
import { shareTime, type Timing } from "./leg-times.ts";
import { applyRemedy, type RemedyStep } from "./remedy.ts";
import type { Found } from "./reshape.ts";
import { sayTime } from "./say-cost.ts";
import { isRefused, slotsAfter, type TrialBase, tryOut } from "./trial.ts";
import { sayMove } from "./ways.ts";

/** A formation in between: a copy of one end somewhere else, or points. */
interface Stop {
	readonly formation: NewFormation;
	readonly copyOf: string | null;
}

interface Detour {
	readonly kind: string;
	readonly change: string;
	readonly cost: string;
	readonly loss: number;
	readonly stops: readonly Stop[];
}

/** Detours that are planned before the search ends. */
const MOST_TRIED = 4;

/** @returns at most one remedy: the first way that flies, those that lose least first */
export function goByWay(base: TrialBase, check: TransitionCheck): Found[] {
	const ends = endsOf(base.show, check.id);
	const [from, to] = ends === null ? [] : [base.slots.get(ends.from.formation), base.slots.get(ends.to.formation)];
	if (ends === null || from === undefined || to === undefined || from.count === 0 || to.count === 0) return [];
	const round = detoursRound(base, ends, from, to);
	// A way in parts takes longer, so it only helps where one flight is far from the bound, or impossible.
	const hard = check.needed === null || check.needed > 1.3 * check.straightLineBound;
	const detours =
		round.length > 0 ? round : hard ? [...detoursApart(base, ends, from, to), ...inParts(base, ends, from, to)] : [];
	let tried = 0;
	for (const detour of detours) {
		if (tried >= MOST_TRIED) break;
		const found = follow(base, check, detour);
		if (found === "crosses") continue;
		if (found !== null) return [found];
		tried++;
	}
	return [];
}

/** Plans the parts (unless straight flights meet a block again, which is seen beforehand), shares the time out among them, and tries the whole. */
function follow(base: TrialBase, check: TransitionCheck, detour: Detour): Found | "crosses" | null {
	const cue = base.show.cues.byId[check.id] as TransitionCue;
	const { departs, arrives } = check;
	if (departs.beat === null || arrives.beat === null) return null;
	const count = detour.stops.length + 1;
	const ids: string[] = [];
	const formations: string[] = [];
	for (const _ of detour.stops) {
		ids.push(newId("c", [...base.show.cues.order, ...ids]));
		formations.push(newId("f", [...base.show.formations.order, ...formations]));
	}
	const stepsAt = (beats: readonly number[]): RemedyStep[] => {
		const steps: RemedyStep[] = detour.stops.map(({ formation, copyOf }, k) =>
			copyOf === null
				? { do: "add-formation", formation: { ...formation, id: formations[k] } }
				: {
						do: "copy-formation",
						of: copyOf,
						id: formations[k],
						change: { name: formation.name, place: formation.place },
					},
		);
		// The cue itself stays the one that arrives; those on the way come before it.
		steps.push({
			do: "change-cue",
			id: cue.id,
			change: { at: beats[count - 1], length: beats[count] - beats[count - 1] },
		});
		detour.stops.forEach((_, k) => {
			const { timeLaw, light, group } = cue;
			const length = beats[k + 1] - beats[k];
			steps.push({
				do: "add-cue",
				cue: { kind: "transition", id: ids[k], at: beats[k], length, formation: formations[k], timeLaw, light, group },
			});
		});
		return steps;
	};
	const even = Array.from(
		{ length: count + 1 },
		(_, k) => departs.beat! + ((arrives.beat! - departs.beat!) * k) / count,
	);
	const ready = new Map<string, Plan>();
	const legs = [...ids, cue.id];
	const show = applyEdit(base.show, (draft) => applyRemedy(draft, { steps: stepsAt(even) })).show;
	const slots = slotsAfter(base, show);
	const problems = legProblems(show, slots, base.ground);
	const needed: number[] = [];
	for (const id of legs) {
		const problem = problems.find((one) => one.id === id);
		if (problem === undefined) return null;
		if (crosses(problem)) return "crosses";
		const plan = planLeg(problem);
		ready.set(problem.key, plan);
		needed.push(plan.shortest);
	}
	const timing: Timing | null = shareTime(base.show, check.id, departs.beat, arrives.beat, needed);
	if (timing === null) return null;
	const steps = stepsAt(timing.beats);
	const trial = tryOut(base, steps, legs, ready);
	if (isRefused(trial)) return null;
	return {
		remedy: {
			kind: detour.kind,
			change: `${detour.change}${timing.change === "" ? "" : ` ${timing.change}`}`,
			cost: `${detour.cost} ${sayTime(base, trial, check)}`.trim(),
			loss: detour.loss + timing.loss,
			steps,
			ghost: trial.slots.get(formations[0])?.positions.slice() ?? null,
		},
		plans: trial.plans,
	};
}

/** Whether even the straight flights of the best assignment meet a blocked volume. */
function crosses(problem: {
	from: Float64Array;
	to: Float64Array;
	limits: { downwash: number };
	blocked: readonly Box[];
}): boolean {
	const paths = assigned(problem.from, problem.to, problem.limits.downwash);
	return (
		problem.blocked.length > 0 && findBreach(paths, 1, problem.from.length / 3, EVERYWHERE, problem.blocked) !== null
	);
}

const EVERYWHERE: Box = { min: [-1e9, -1e9, -1e9], max: [1e9, 1e9, 1e9] };

function assigned(from: Float64Array, to: Float64Array, downwash: number): Float64Array {
	const solved = assign(scaledMillimetres(from, downwash), scaledMillimetres(to, downwash));
	if (solved === null) throw new Error("an assignment without forbidden pairs always exists");
	return straightPaths(from, to, solved.target).coefficients;
}

/** The blocked volumes that straight flights meet, as one; null where they meet none. */
function blockInTheWay(base: TrialBase, from: FleetSlots, to: FleetSlots): Box | null {
	const { blocked } = base.show.venue;
	if (blocked.length === 0) return null;
	const paths = assigned(from.all, to.all, base.show.fleet.limits.downwash);
	const met = blocked.filter((box) => findBreach(paths, 1, from.fleet, EVERYWHERE, [box]) !== null);
	if (met.length === 0) return null;
	const edge = (pick: "min" | "max", of: (...values: number[]) => number): [number, number, number] =>
		[0, 1, 2].map((axis) => of(...met.map((box) => box[pick][axis]))) as [number, number, number];
	return { min: edge("min", Math.min), max: edge("max", Math.max) };
}

const FACES = [
	{ axis: 2, sign: 1, words: "over" },
	{ axis: 0, sign: -1, words: "round the left of" },
	{ axis: 0, sign: 1, words: "round the right of" },
	{ axis: 1, sign: 1, words: "round the back of" },
	{ axis: 1, sign: -1, words: "round the front of" },
] as const;

type Ends = { readonly from: End; readonly to: End };

/** Ways beyond each face of the block, by how far the pictures go out of their way. */
function detoursRound(base: TrialBase, ends: Ends, from: FleetSlots, to: FleetSlots): Detour[] {
	const block = blockInTheWay(base, from, to);
	if (block === null) return [];
	const { spacing } = base.show.fleet.limits;
	const found: { detour: Detour; way: number }[] = [];
	for (const { axis, sign, words } of FACES) {
		const line = sign > 0 ? block.max[axis] + spacing : block.min[axis] - spacing;
		const shiftOf = (slots: FleetSlots): number => {
			const box = boxOf(slots.all);
			const short = sign > 0 ? line - box.min[axis] : box.max[axis] - line;
			return Math.max(0, Math.ceil(short * 2) / 2);
		};
		const [first, second] = [shiftOf(from), shiftOf(to)];
		const stop = (end: End, slots: FleetSlots, metres: number): Stop | null => {
			const move = [0, 0, 0];
			move[axis] = sign * metres;
			const box = boxOf(slots.positions);
			const { volume } = base.show.venue;
			if (box.min[axis] + move[axis] < volume.min[axis] || box.max[axis] + move[axis] > volume.max[axis]) return null;
			const { place } = base.show.formations.byId[end.formation];
			const name = `${end.name}, out of the way`;
			const moved = changePlace(place, middleOf(slots), { move });
			return { formation: { ...base.show.formations.byId[end.formation], name, place: moved }, copyOf: end.formation };
		};
		const add = (stops: readonly (Stop | null)[], metres: readonly number[], names: readonly string[]): void => {
			const whole = stops.filter((one) => one !== null);
			if (whole.length < stops.length) return;
			const parts = names.map((name, k) => {
				const move = [0, 0, 0];
				move[axis] = sign * metres[k];
				return `${name} ${sayMove(move)}`;
			});
			const way = metres.reduce((sum, value) => sum + value, 0);
			found.push({
				way,
				detour: {
					kind: "waypoint",
					change: `Fly ${words} what is blocked in ${whole.length + 1} transitions, by way of ${parts.join(" and then ")}.`,
					cost: `The audience sees the picture make the detour: ${way.toFixed(1)} m out of its way.`,
					loss: 0.4 + 0.1 * whole.length + Math.min(0.3, way / 200),
					stops: whole,
				},
			});
		};
		if (first > 0) add([stop(ends.from, from, first)], [first], [ends.from.name]);
		if (second > 0) add([stop(ends.to, to, second)], [second], [ends.to.name]);
		if (first > 0 && second > 0) {
			const stops = [stop(ends.from, from, first), stop(ends.to, to, second)];
			add(stops, [first, second], [ends.from.name, ends.to.name]);
		}
	}
	return found.sort((a, b) => a.detour.loss - b.detour.loss).map(({ detour }) => detour);
}

/** By way of one end drawn apart, where straight flights pass without conflict (√2 times the spacing). */
function detoursApart(base: TrialBase, ends: Ends, from: FleetSlots, to: FleetSlots): Detour[] {
	const { spacing, downwash } = base.show.fleet.limits;
	return (
		[
			[ends.to, to],
			[ends.from, from],
		] as const
	).flatMap(([end, slots]): Detour[] => {
		const gap = smallestGap(slots.positions, downwash).distance;
		const scale = Math.ceil((100 * (Math.SQRT2 * spacing + SPACING_HAIR)) / gap) / 100;
		if (!Number.isFinite(scale) || scale <= 1) return [];
		const formation = base.show.formations.byId[end.formation];
		const place = changePlace(formation.place, middleOf(slots), { scale });
		return [
			{
				kind: "waypoint",
				change: `Fly in two transitions, by way of ${end.name} drawn apart to ${Math.round(100 * scale)} %.`,
				cost: `The audience sees ${end.name} ${end.which === "to" ? "come together" : "open up"} on the way.`,
				loss: 0.45,
				stops: [{ formation: { ...formation, name: `${end.name}, drawn apart`, place }, copyOf: end.formation }],
			},
		];
	});
}

/**
 * Half of the fleet goes ahead, the other half follows: by way of points, some in the one picture and some in the other.
 * The show file moves the whole fleet with every transition, so a part that stays is a part whose slot stays. Only where
 * every drone is lit in both pictures: among points a dark drone could not be told from a lit one.
 */
function inParts(base: TrialBase, ends: Ends, from: FleetSlots, to: FleetSlots): Detour[] {
	const count = from.fleet;
	if (from.count < count || to.count < count || count < 4) return [];
	const { spacing, downwash } = base.show.fleet.limits;
	const paths = assigned(from.all, to.all, downwash);
	const start = (i: number, axis: number): number => paths[6 * i + 2 * axis];
	const way = (i: number, axis: number): number => paths[6 * i + 2 * axis + 1];
	const mean = [0, 1, 2].map((axis) => {
		let sum = 0;
		for (let i = 0; i < count; i++) sum += way(i, axis);
		return sum / count;
	});
	const along = (i: number): number => [0, 1, 2].reduce((sum, axis) => sum + mean[axis] * start(i, axis), 0);
	const order = Array.from({ length: count }, (_, i) => i).sort((a, b) => along(b) - along(a) || a - b);
	const ahead = new Set(order.slice(0, Math.floor(count / 2)));
	const mixed = new Float64Array(3 * count);
	for (let i = 0; i < count; i++) {
		for (let axis = 0; axis < 3; axis++) mixed[3 * i + axis] = start(i, axis) + (ahead.has(i) ? way(i, axis) : 0);
	}
	if (smallestGap(mixed, downwash).distance < spacing - GAP_TOLERANCE) return [];
	const points = Array.from({ length: count }, (_, i): [number, number, number] => [
		mixed[3 * i],
		mixed[3 * i + 1],
		mixed[3 * i + 2],
	]);
	const { colours, groups } = base.show.formations.byId[ends.from.formation];
	const name = `${ends.from.name} and ${ends.to.name}, half each`;
	return [
		{
			kind: "part-first",
			change: `Let ${ahead.size} drones go first and the other ${count - ahead.size} follow, in two transitions.`,
			cost: "The audience sees both pictures half done on the way.",
			loss: 0.5,
			stops: [{ copyOf: null, formation: { name, shape: { kind: "points", points }, colours, groups } }],
		},
	];
}
