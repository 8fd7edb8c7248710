import { type BeatMap, type CueChange, createBeatMap, type Show } from "../../show/index.ts";
import { GAP_TOLERANCE, LIMIT_TOLERANCE } from "../../units/index.ts";
import type { TransitionCheck } from "../check.ts";
import type { LegProblem } from "../leg-problem.ts";
import type { Plan } from "../plan.ts";
import { planLeg } from "../plan-leg.ts";
import { provePlanOnce } from "../proof/prove-plan.ts";
import { withKey } from "../show/leg-problems.ts";
import { bestFirst, type Remedy } from "./remedy.ts";
import { inHand, sayBeats } from "./say-cost.ts";

/**
 * What would make transitions fly that are too fast. A plan doesn't depend on the time it has, so an earlier departure
 * or a later arrival is proven by the needed time alone; another time law is planned and proven anew. Best first: what
 * costs the audience least.
 */
export function findRemedies(
	show: Show,
	checks: readonly TransitionCheck[],
	problems: ReadonlyMap<string, LegProblem>,
): Map<string, Remedy[]> {
	const beatMap = createBeatMap(show.grid);
	const found = new Map<string, Remedy[]>();
	checks.forEach((check, k) => {
		if (check.needed === null || !check.verdicts.includes("too-fast")) return;
		const before = checks[k - 1]?.arrives.time ?? Number.NEGATIVE_INFINITY;
		const after = checks[k + 1]?.departs.time ?? Number.POSITIVE_INFINITY;
		const remedies = [
			fasterLaw(check, show, problems.get(check.id)),
			departEarlier(check, beatMap, before),
			arriveLater(check, beatMap, after),
			departAndArrive(check, beatMap, before, after),
		];
		// Where the time is there, it is there: both ends need not be moved.
		const one = remedies.slice(0, 3).filter((remedy) => remedy !== null);
		found.set(check.id, bestFirst(one.length > 0 ? one : remedies.filter((remedy) => remedy !== null)));
	});
	return found;
}

const changing = (id: string, change: CueChange): Pick<Remedy, "steps" | "ghost"> => ({
	steps: [{ do: "change-cue", id, change }],
	ghost: null,
});

/** A departure costs as much as it takes of the hold before it. */
function shareLost(beats: number, hold: number | null, taken: number): number {
	return hold === null ? Math.min(0.2, 0.01 * beats) : 0.05 + 0.4 * Math.min(1, taken / Math.max(1e-9, hold));
}

const enough = (available: number, needed: number): boolean => needed <= available * (1 + LIMIT_TOLERANCE);

/** Fewest whole beats by which the departure must come forward; null where the picture before has no time to give. */
function departEarlier(check: TransitionCheck, beatMap: BeatMap, before: number): Remedy | null {
	const { needed, departs, arrives } = check;
	if (needed === null || departs.beat === null || arrives.beat === null) return null;
	for (let beats = 1; beats < 4096; beats++) {
		const time = beatMap.secondsAt(departs.beat - beats);
		if (time < before - 1e-9) return null;
		const available = arrives.time - time;
		if (!enough(available, needed)) continue;
		const hold = time - before;
		const cost = Number.isFinite(hold)
			? `The picture before stands ${hold.toFixed(1)} s instead of ${(departs.time - before).toFixed(1)} s; ${inHand(available, needed)}.`
			: `The opening stands ${(departs.time - time).toFixed(1)} s less; ${inHand(available, needed)}.`;
		return {
			kind: "depart-earlier",
			change: `Depart ${sayBeats(beats)} earlier.`,
			cost,
			loss: shareLost(beats, Number.isFinite(hold) ? departs.time - before : null, departs.time - time),
			...changing(check.id, { at: departs.beat - beats, length: arrives.beat - departs.beat + beats }),
		};
	}
	return null;
}

/** Fewest whole beats by which the arrival must come later; null where the picture after has no time to give. */
function arriveLater(check: TransitionCheck, beatMap: BeatMap, after: number): Remedy | null {
	const { needed, departs, arrives } = check;
	if (needed === null || departs.beat === null || arrives.beat === null) return null;
	for (let beats = 1; beats < 4096; beats++) {
		const time = beatMap.secondsAt(arrives.beat + beats);
		if (time > after + 1e-9) return null;
		const available = time - departs.time;
		if (!enough(available, needed)) continue;
		const place = beatMap.barAt(arrives.beat + beats);
		const off =
			place.beat < 1.01
				? `on bar ${place.bar}`
				: `on beat ${Math.round(place.beat)} of bar ${place.bar}, not on a downbeat`;
		return {
			kind: "arrive-later",
			change: `Arrive ${sayBeats(beats)} later.`,
			cost: `The picture stands ${off}; ${inHand(available, needed)}.`,
			loss: 0.1 + (place.beat < 1.01 ? 0 : 0.15) + Math.min(0.3, 0.02 * beats),
			...changing(check.id, { at: departs.beat, length: arrives.beat - departs.beat + beats }),
		};
	}
	return null;
}

/** Where neither end alone has the time: as early as the picture before allows, and as much later as is still missing. */
function departAndArrive(check: TransitionCheck, beatMap: BeatMap, before: number, after: number): Remedy | null {
	const { needed, departs, arrives } = check;
	if (needed === null || departs.beat === null || arrives.beat === null) return null;
	let early = 0;
	while (early < 4096 && beatMap.secondsAt(departs.beat - early - 1) >= before - 1e-9) early++;
	if (early === 0 || early === 4096) return null;
	const start = beatMap.secondsAt(departs.beat - early);
	for (let late = 1; late < 4096; late++) {
		const time = beatMap.secondsAt(arrives.beat + late);
		if (time > after + 1e-9) return null;
		if (!enough(time - start, needed)) continue;
		return {
			kind: "depart-and-arrive",
			change: `Depart ${sayBeats(early)} earlier and arrive ${sayBeats(late)} later.`,
			cost: `The picture before has no hold left to speak of; ${inHand(time - start, needed)}.`,
			loss: 0.5,
			...changing(check.id, { at: departs.beat - early, length: arrives.beat - departs.beat + early + late }),
		};
	}
	return null;
}

/** The S-curve where minimum jerk was asked for: planned and proven before it is offered. */
function fasterLaw(check: TransitionCheck, show: Show, problem: LegProblem | undefined): Remedy | null {
	const cue = show.cues.byId[check.id];
	if (problem === undefined || cue?.kind !== "transition" || cue.timeLaw !== "minimum-jerk") return null;
	const other = withKey({ ...problem, timeLaw: "s-curve" });
	const plan: Plan = planLeg(other);
	const proof = provePlanOnce(plan, other);
	const parted = proof.gap === null || proof.gap.distance >= show.fleet.limits.spacing - GAP_TOLERANCE;
	if (!enough(check.available, plan.shortest) || proof.breach !== null || !parted) return null;
	return {
		kind: "time-law",
		change: "Fly on the S-curve instead of minimum jerk.",
		cost: `It starts and stops less softly; ${inHand(check.available, plan.shortest)}.`,
		loss: 0,
		...changing(check.id, { timeLaw: "s-curve" }),
	};
}
