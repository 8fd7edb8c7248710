export type { FormationCheck, ShowCheck, TransitionCheck } from "./check.ts";
export type { AssignmentCertificate, Plan, Proof, Remedy, TimeLaw, Verdict } from "./plan.ts";
export type { Leg, ShowFlight } from "./show-flight.ts";
