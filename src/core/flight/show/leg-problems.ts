import { createSha256 } from "../../maths/index.ts";
import {
	type Box,
	createBeatMap,
	cueTimes,
	type FleetSlots,
	type Show,
	type TransitionCue,
	transitionsInTime,
} from "../../show/index.ts";
import { GAP_TOLERANCE, StarstaveError } from "../../units/index.ts";
import { lawDuration } from "../law/time-law.ts";
import { verticalLaw } from "../law/vertical-law.ts";
import type { LegProblem } from "../leg-problem.ts";
import type { Plan } from "../plan.ts";
import { PLANNER_VERSION } from "../plan-leg.ts";
import { smallestWaveGap } from "../proof/waves.ts";
import { DEFAULT_TAKEOFF, type Stack, stackOver } from "./take-off-stack.ts";
import { gatherWide, sortInLanes, widerTimes } from "./way-home.ts";

export const GROUND = "take-off grid";

/** The formation in which the fleet waits when the music starts: the show's, else the first transition's, else the first. */
export function openingOf(show: Show): string | null {
	const opening = show.opening ?? transitionsInTime(show, createBeatMap(show.grid))[0]?.formation;
	return opening ?? show.formations.order[0] ?? null;
}

/** A transition of the show with its times in seconds; a late start is held up by the arrival before it. */
export interface TimedTransition {
	readonly cue: TransitionCue;
	readonly from: string;
	readonly to: string;
	readonly departs: number;
	readonly arrives: number;
}

export function timedTransitions(show: Show): TimedTransition[] {
	const beatMap = createBeatMap(show.grid);
	let from = openingOf(show);
	let free = -Infinity;
	const timed: TimedTransition[] = [];
	for (const cue of transitionsInTime(show, beatMap)) {
		if (from === null) break;
		const { start, end } = cueTimes(cue, beatMap);
		const departs = Math.max(start, free);
		const arrives = Math.max(end, departs);
		timed.push({ cue, from, to: cue.formation, departs, arrives });
		free = arrives;
		from = cue.formation;
	}
	return timed;
}

/**
 * What has to be planned for a show: the climb in waves, launch to the opening, every transition, landing. Where each
 * drone stands at the end depends on all transitions, and each must land on its own place, so sorting the fleet over the
 * grid is only listed once `plans` holds all others.
 * @param slots every formation filled up to the fleet
 * @param ground 3·N metres on the take-off grid
 * @param plans by key
 */
export function legProblems(
	show: Show,
	slots: ReadonlyMap<string, FleetSlots>,
	ground: Float64Array,
	plans?: ReadonlyMap<string, Plan>,
): LegProblem[] {
	const opening = openingOf(show);
	const count = show.fleet.count;
	if (opening === null || count === 0) return [];
	const slotsOf = (id: string): Float64Array => {
		const found = slots.get(id);
		if (found === undefined || found.all.length !== 3 * count) {
			throw new StarstaveError("flight", `Formation ${id} has no slots for ${count} drones; fill it before planning.`);
		}
		return found.all;
	};
	if (ground.length !== 3 * count) {
		throw new StarstaveError("flight", `The take-off grid has ${ground.length / 3} places for ${count} drones.`);
	}
	const takeoff = show.takeoff ?? DEFAULT_TAKEOFF;
	const stack = stackOver(ground, show.fleet.limits, takeoff);
	const open = openSpace(show.venue.volume, ground);
	const own = Int32Array.from({ length: count }, (_, i) => i);
	const problems: LegProblem[] = [];
	const shared = { limits: show.fleet.limits, blocked: show.venue.blocked };
	const vertical = (kind: "climb" | "descend", from: Float64Array, to: Float64Array): LegProblem =>
		withKey({
			...shared,
			id: kind === "climb" ? "launch" : "landing",
			kind,
			fromFormation: GROUND,
			toFormation: GROUND,
			from,
			to,
			target: own,
			delays: delaysOf(kind, from, to, stack, show, takeoff.interval),
			volume: open,
			timeLaw: "s-curve",
			available: null,
		});
	problems.push(vertical("climb", ground, stack.positions));
	const launch = {
		...shared,
		id: "launch",
		kind: "transition" as const,
		fromFormation: GROUND,
		toFormation: opening,
		target: null,
		delays: null,
		volume: open,
		timeLaw: "s-curve" as const,
		available: null,
	};
	problems.push(withKey({ ...launch, from: stack.positions, to: slotsOf(opening) }));
	const timed = timedTransitions(show);
	for (const { cue, from, to, departs, arrives } of timed) {
		problems.push(
			withKey({
				...launch,
				id: cue.id,
				fromFormation: from,
				toFormation: to,
				from: slotsOf(from),
				to: slotsOf(to),
				volume: show.venue.volume,
				timeLaw: cue.timeLaw,
				available: arrives - departs,
			}),
		);
	}
	const last = timed.length > 0 ? timed[timed.length - 1].to : opening;
	const landing = { ...launch, id: "landing", fromFormation: last, toFormation: GROUND };
	const wide = gatherWide(stack.positions, show.fleet.limits, widerTimes(stack.positions, show.fleet.limits, open));
	// A gathering drawn wide may reach over the flight volume's side: it is above the take-off grid, not in the show.
	const home = openSpace(open, wide);
	problems.push(withKey({ ...landing, from: slotsOf(last), to: wide, volume: home }));
	const rows = plans === undefined ? null : whereDronesEnd(problems, plans, count);
	if (rows !== null) {
		const droneAt = new Int32Array(count);
		for (let drone = 0; drone < count; drone++) droneAt[rows[drone]] = drone;
		const sorted = sortInLanes(wide, droneAt, show.fleet.limits);
		const over = { ...landing, fromFormation: GROUND, volume: home };
		if (sorted !== null) {
			problems.push(withKey({ ...over, from: wide, to: sorted.risen, target: own }));
			problems.push(withKey({ ...over, from: sorted.risen, to: sorted.crossed, target: sorted.target }));
			problems.push(withKey({ ...over, from: sorted.crossed, to: wide, target: own }));
		}
		if (wide !== stack.positions) problems.push(withKey({ ...over, from: wide, to: stack.positions, target: own }));
	}
	problems.push(vertical("descend", stack.positions, ground));
	return problems;
}

/** N: the slot of each drone after the legs that are planned; null while a plan is missing. */
function whereDronesEnd(
	problems: readonly LegProblem[],
	plans: ReadonlyMap<string, Plan>,
	count: number,
): Int32Array | null {
	let rows = Int32Array.from({ length: count }, (_, i) => i);
	for (const { key } of problems) {
		const plan = plans.get(key);
		if (plan === undefined) return null;
		rows = rows.map((row) => plan.target[row]);
	}
	return rows;
}

/** Launch and landing may use what lies between the take-off grid and the flight volume. */
function openSpace(volume: Box, ground: Float64Array): Box {
	const min: [number, number, number] = [...volume.min];
	const max: [number, number, number] = [...volume.max];
	for (let k = 0; k < ground.length; k++) {
		min[k % 3] = Math.min(min[k % 3], ground[k]);
		max[k % 3] = Math.max(max[k % 3], ground[k]);
	}
	return { min, max };
}

/**
 * Seconds that each drone waits: its wave's turn times the interval (upwards the highest layer first, downwards the
 * lowest). Where the interval would bring two waves too near, it is lengthened until they keep spacing.
 */
function delaysOf(
	kind: "climb" | "descend",
	from: Float64Array,
	to: Float64Array,
	stack: Stack,
	show: Show,
	asked: number,
): Float64Array | null {
	if (stack.waves < 2) return null;
	const { limits } = show.fleet;
	const law = verticalLaw(kind, from, to, limits, "s-curve");
	const paths = new Float64Array(2 * from.length);
	for (let k = 0; k < from.length; k++) {
		paths[2 * k] = from[k];
		paths[2 * k + 1] = to[k] - from[k];
	}
	const duration = lawDuration(law);
	const layers = layersOf(stack);
	const turn = (i: number): number =>
		kind === "climb" ? stack.waveOf[i] : turnDown(stack.waveOf[i], layers, stack.waves);
	let interval = Math.min(asked, duration);
	while (true) {
		const delays = Float64Array.from(stack.waveOf, (_, i) => turn(i) * interval);
		const gap = smallestWaveGap(paths, delays, law, limits.downwash, 2 * limits.spacing);
		if (gap.distance >= limits.spacing - GAP_TOLERANCE || interval >= duration) return delays;
		interval = Math.min(duration, Math.max(0.5, interval * 1.15));
	}
}

function layersOf(stack: Stack): number {
	const heights = new Set<number>();
	for (let k = 2; k < stack.positions.length; k += 3) heights.add(stack.positions[k]);
	return Math.max(1, Math.min(stack.waves, heights.size));
}

/** The lowest layer, which climbed last, comes down first. */
function turnDown(wave: number, layers: number, waves: number): number {
	const rounds = Math.ceil(waves / layers);
	const layer = wave % layers;
	const round = Math.floor(wave / layers);
	return (layers - 1 - layer) * rounds + round;
}

/** Names a problem by all that its plan depends on. */
export function withKey(problem: Omit<LegProblem, "key">): LegProblem {
	const { limits, volume } = problem;
	const hash = createSha256();
	const numbers = (values: ArrayLike<number>): void => {
		const own = Float64Array.from(values);
		hash.update(new Uint8Array(Float64Array.of(own.length).buffer));
		hash.update(new Uint8Array(own.buffer));
	};
	numbers([PLANNER_VERSION, ["transition", "climb", "descend"].indexOf(problem.kind)]);
	numbers([limits.horizontal, limits.climb, limits.descent, limits.acceleration, limits.jerk]);
	numbers([limits.spacing, limits.downwash, problem.timeLaw === "s-curve" ? 0 : 1]);
	numbers([...volume.min, ...volume.max]);
	for (const box of problem.blocked) numbers([...box.min, ...box.max]);
	numbers(problem.from);
	numbers(problem.to);
	numbers(problem.target ?? []);
	numbers(problem.delays ?? []);
	return { ...problem, key: hash.hex() };
}
