export type { Airtime } from "./care/airtime.ts";
export type { AsFlown, LegAsFlown } from "./care/as-flown.ts";
export { type Care, careFor } from "./care/care.ts";
export type { FallZone } from "./care/fall-zone.ts";
export { type CareTopic, sayCare } from "./care/say-care.ts";
export type { WakeHold } from "./care/wake.ts";
export type { WakeRemedy } from "./care/wake-remedies.ts";
export type { FormationCheck, ShowCheck, TransitionCheck } from "./check.ts";
export { straightTime } from "./law/straight-time.ts";
export { lawAt, lawDuration } from "./law/time-law.ts";
export { LANDING_SPEED, LAST_METRES, LAST_METRES_SPEED } from "./law/vertical-law.ts";
export type { LegProblem, PlanProgress } from "./leg-problem.ts";
export type { AssignmentCertificate, Plan, Proof, TimeLaw, Verdict } from "./plan.ts";
export { PLANNER_VERSION, planLeg } from "./plan-leg.ts";
export { neededTime, type PlanProof, provePlan } from "./proof/prove-plan.ts";
export { applyRemedy, bestFirst, type Remedy, type RemedyStep } from "./remedy/remedy.ts";
export type { Found as FoundRemedy } from "./remedy/reshape.ts";
export { mendedFormation, REMEDY_SEARCHES, type RemedySearch, searchRemedies } from "./remedy/search-remedies.ts";
export { assembleFlight } from "./show/assemble-flight.ts";
export { checkShow, type ProofCache } from "./show/check-show.ts";
export { dronePositions } from "./show/drone-positions.ts";
export { type FlownShow, flyShow } from "./show/fly-show.ts";
export { legProblems, openingOf, withKey } from "./show/leg-problems.ts";
export {
	busiestMoment,
	createMotion,
	type LegTraces,
	limitShare,
	motionAt,
	type Trace,
	traceLegs,
} from "./show/traces.ts";
export type { Leg, ShowFlight } from "./show-flight.ts";
