import { createBeatMap, cuePosition, type FleetSlots, type Show } from "../../show/index.ts";
import { GAP_TOLERANCE } from "../../units/index.ts";
import type { FormationCheck, ShowCheck, TransitionCheck } from "../check.ts";
import { lawAt, lawDuration } from "../law/time-law.ts";
import type { LegProblem } from "../leg-problem.ts";
import type { Plan, Proof, Verdict } from "../plan.ts";
import { neededTime, type PlanProof, proofFor, provePlanOnce } from "../proof/prove-plan.ts";
import { findRemedies } from "../remedy/remedies-in-time.ts";
import type { Leg, ShowFlight } from "../show-flight.ts";
import { checkSlots } from "./check-slots.ts";
import { legProblems } from "./leg-problems.ts";

const OWN_PLACE = "each drone to its own place";

/** Proofs by key of their problem: a plan that has been proven in this session need not be proven twice. */
export type ProofCache = Map<string, { readonly plan: Plan; readonly proof: PlanProof }>;

/**
 * Feasibility of the whole show: every leg proven in the time it has, every formation, endurance.
 * @param plans by key of their problems
 * @param proofs kept from an earlier check; what is proven here is added
 */
export function checkShow(
	show: Show,
	slots: ReadonlyMap<string, FleetSlots>,
	flight: ShowFlight,
	plans: ReadonlyMap<string, Plan>,
	proofs: ProofCache = new Map(),
): ShowCheck {
	const problems = legProblems(show, slots, flight.ground, plans);
	const formations = checkFormations(show, slots);
	const checks = flight.legs.map((leg, k) => checkLeg(show, leg, problems[k], proofs));
	const flown = checks.filter(({ id }) => id !== "launch" && id !== "landing");
	const remedies = findRemedies(show, flown, new Map(problems.map((problem) => [problem.id, problem])));
	const transitions = flown.map((check) => ({ ...check, remedies: remedies.get(check.id) ?? [] }));
	const launch = joinChecks(checks.filter(({ id }) => id === "launch"));
	const landing = joinChecks(checks.filter(({ id }) => id === "landing"));
	const { limits } = show.fleet;
	const endurance = { airborne: flight.ends - flight.begins, limit: limits.endurance * (1 - limits.reserve) };
	const legsFly = [launch, landing, ...transitions].every(
		(check) => check === null || check.verdicts.includes("flies"),
	);
	const used = usedFormations(flight);
	const formationsFly = formations.every(({ id, verdicts }) => !used.has(id) || verdicts.includes("flies"));
	return {
		flies: legsFly && formationsFly && endurance.airborne <= endurance.limit,
		launch,
		landing,
		transitions,
		formations,
		endurance,
		notes: notesOf(show, flight, endurance),
	};
}

function checkLeg(show: Show, leg: Leg, problem: LegProblem, proofs: ProofCache): TransitionCheck {
	const { plan } = leg;
	let kept = proofs.get(problem.key);
	if (kept?.plan !== plan) {
		kept = { plan, proof: provePlanOnce(plan, problem) };
		proofs.set(problem.key, kept);
	}
	const available = leg.arrives - leg.departs;
	const proof = proofFor(kept.proof, plan, problem, available);
	const works = neverTooFast(proof.verdicts);
	const needed = works ? neededTime(plan, problem) : null;
	const cue = show.cues.byId[leg.id];
	const beatMap = createBeatMap(show.grid);
	const departs = cue === undefined ? null : Math.max(cuePosition(cue, beatMap), beatMap.positionAt(leg.departs));
	const arrives = cue === undefined ? null : beatMap.positionAt(leg.arrives);
	const shortestArrival = needed === null || arrives === null ? null : beatMap.positionAt(leg.departs + needed);
	return {
		id: leg.id,
		from: problem.fromFormation,
		to: problem.toFormation,
		departs: { beat: departs, time: leg.departs },
		arrives: { beat: arrives, time: leg.arrives },
		available,
		needed,
		slack: needed === null ? null : available - needed,
		slackBeats: shortestArrival === null || arrives === null ? null : arrives - shortestArrival,
		straightLineBound: plan.straightLineBound,
		verdicts: proof.verdicts,
		peak: proof.peak,
		gap: gapInShow(proof, leg),
		breach: breachInShow(kept.proof, leg),
		certificate: { assignment: describeAssignment(problem, plan), separation: proof.separation },
		remedies: [],
	};
}

/** Whether more time would help: separation and venue don't depend on the duration. */
function neverTooFast(verdicts: readonly Verdict[]): boolean {
	return !verdicts.includes("too-close") && !verdicts.includes("out-of-venue");
}

/** From start slots and seconds from departure to drones and seconds of the show. */
function gapInShow(proof: Proof, leg: Leg): Proof["gap"] {
	if (proof.gap === null) return null;
	const { distance, time, drones } = proof.gap;
	const first = leg.rowOfDrone.indexOf(drones[0]);
	const second = leg.rowOfDrone.indexOf(drones[1]);
	return { distance, time: leg.departs + time, drones: [Math.min(first, second), Math.max(first, second)] };
}

/** Likewise for the first drone that leaves the flight volume or enters a blocked one. */
function breachInShow({ breach }: PlanProof, leg: Leg): TransitionCheck["breach"] {
	if (breach === null) return null;
	const { law } = leg.plan;
	const own = lawDuration(law);
	let [low, high] = [0, own];
	for (let k = 0; k < 50; k++) {
		const middle = (low + high) / 2;
		if (lawAt(law, middle) < breach.at) low = middle;
		else high = middle;
	}
	const share = own > 0 ? high / own : 0;
	return {
		drone: leg.rowOfDrone.indexOf(breach.drone),
		time: leg.departs + share * (leg.arrives - leg.departs),
		blocked: breach.blocked < 0 ? null : breach.blocked,
	};
}

function describeAssignment(problem: LegProblem, plan: Plan): string {
	if (problem.target !== null) return OWN_PLACE;
	const { optimal, cost, bound, cap } = plan.certificate;
	if (!optimal) return `within ${((cost / Math.max(1, bound) - 1) * 100).toFixed(2)} % of the least sum of squares`;
	const all = "least sum of squares, dual feasible over all pairs";
	return cap === null ? all : `${all} with no flight over ${cap.toFixed(2)} of the straight-line bound`;
}

/** Launch and landing are several legs each, reported as one; null where there are none. */
function joinChecks(checks: readonly TransitionCheck[]): TransitionCheck | null {
	return checks.length === 0 ? null : checks.reduce(joinTwo);
}

function joinTwo(first: TransitionCheck, second: TransitionCheck): TransitionCheck {
	const most = (name: keyof Proof["peak"]): number => Math.max(first.peak[name], second.peak[name]);
	const needed = first.needed === null || second.needed === null ? null : first.needed + second.needed;
	const available = first.available + second.available;
	const broken = [...first.verdicts, ...second.verdicts].filter(
		(verdict) => verdict !== "flies" && verdict !== "tight",
	);
	const tight = [...first.verdicts, ...second.verdicts].filter((verdict) => verdict === "tight");
	const verdicts: Verdict[] = broken.length > 0 ? [...new Set(broken)] : ["flies", ...new Set(tight)];
	const gaps = [first.gap, second.gap].filter((gap) => gap !== null);
	gaps.sort((a, b) => a.distance - b.distance);
	const free = first.certificate.assignment === OWN_PLACE ? second : first;
	return {
		id: first.id,
		from: first.from,
		to: second.to,
		departs: first.departs,
		arrives: second.arrives,
		available,
		needed,
		slack: needed === null ? null : available - needed,
		slackBeats: null,
		straightLineBound: first.straightLineBound + second.straightLineBound,
		verdicts,
		peak: {
			horizontal: most("horizontal"),
			climb: most("climb"),
			descent: most("descent"),
			acceleration: most("acceleration"),
			jerk: most("jerk"),
		},
		gap: gaps[0] ?? null,
		breach: first.breach ?? second.breach,
		certificate: {
			assignment: free.certificate.assignment,
			separation: [...new Set([first.certificate.separation, second.certificate.separation])].join("; "),
		},
		remedies: [],
	};
}

/** Every formation's own gap, reserve slots included, and its place in the venue. */
function checkFormations(show: Show, slots: ReadonlyMap<string, FleetSlots>): FormationCheck[] {
	return show.formations.order.map((id) => {
		const positions = slots.get(id)?.all ?? new Float64Array(0);
		return { id, ...checkSlots(positions, show.fleet.limits, show.venue) };
	});
}

function usedFormations(flight: ShowFlight): Set<string> {
	return new Set(flight.stays.map(({ formation }) => formation));
}

function notesOf(show: Show, flight: ShowFlight, endurance: ShowCheck["endurance"]): string[] {
	const notes = [
		`Slots are whole millimetres, which can move a gap by √3 mm: a gap counts as kept down to ${GAP_TOLERANCE * 1000} mm under the spacing.`,
		"The proof covers the plan. Spacing must include position error, tracking and wind; the flight director, local codes and licensed practice decide.",
	];
	if (endurance.airborne > endurance.limit) {
		notes.unshift(
			`The fleet is in the air for ${endurance.airborne.toFixed(0)} s from motor start to the last landing, ${(endurance.airborne - endurance.limit).toFixed(0)} s more than endurance less reserve.`,
		);
	}
	if (flight.drones === 0) notes.unshift("The fleet has no drones: there is nothing to fly.");
	else if (show.formations.order.length === 0) notes.unshift("The show has no formations: there is nothing to fly.");
	return notes;
}
