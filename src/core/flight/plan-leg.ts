import { GAP_TOLERANCE } from "../units/index.ts";
import { assign } from "./assign/assign.ts";
import { lawForPaths } from "./law/fleet-law.ts";
import { straightTime } from "./law/straight-time.ts";
import { lawDuration } from "./law/time-law.ts";
import { verticalLaw } from "./law/vertical-law.ts";
import type { LegProblem, PlanProgress } from "./leg-problem.ts";
import { scaledMillimetres } from "./measure.ts";
import { guaranteedPaths } from "./paths/guaranteed.ts";
import { type Paths, straightPaths } from "./paths/polynomial-paths.ts";
import type { AssignmentCertificate, Plan } from "./plan.ts";
import { smallestSeparation } from "./proof/separation.ts";

/** Rises whenever the same problem would give another plan. */
export const PLANNER_VERSION = 1;

/** Plans one leg. The same problem gives the same plan, on any number of workers. */
export function planLeg(problem: LegProblem, onProgress?: PlanProgress): Plan {
	const { from, to, limits } = problem;
	const count = from.length / 3;
	onProgress?.(0, "assigning");
	let target: Int32Array;
	let certificate: AssignmentCertificate;
	if (problem.target !== null) {
		target = problem.target;
		certificate = { optimal: false, cost: 0, bound: 0, cap: null };
	} else {
		const solved = assign(scaledMillimetres(from, limits.downwash), scaledMillimetres(to, limits.downwash));
		if (solved === null) throw new Error("an assignment without forbidden pairs always exists");
		target = solved.target;
		certificate = { optimal: solved.optimal, cost: solved.cost, bound: solved.bound, cap: null };
	}
	onProgress?.(0.5, "flying straight");
	let paths: Paths = straightPaths(from, to, target);
	let method = "straight";
	if (problem.kind === "transition") {
		const gap = smallestSeparation(paths.coefficients, 1, count, limits.downwash);
		if (gap.distance < limits.spacing - GAP_TOLERANCE && certificate.optimal) {
			paths = guaranteedPaths(from, to, target, problem.volume);
			method = "guaranteed";
		}
	}
	const law =
		problem.kind === "transition"
			? lawForPaths(paths, count, limits, problem.timeLaw)
			: verticalLaw(problem.kind, from, to, limits, problem.timeLaw);
	let bound = 0;
	for (let i = 0; i < count; i++) {
		const x = to[3 * target[i]] - from[3 * i];
		const y = to[3 * target[i] + 1] - from[3 * i + 1];
		const z = to[3 * target[i] + 2] - from[3 * i + 2];
		bound = Math.max(bound, straightTime(x, y, z, limits));
	}
	onProgress?.(1, "planned");
	return {
		version: PLANNER_VERSION,
		target,
		degree: paths.degree,
		paths: paths.coefficients,
		law,
		shortest: lawDuration(law),
		straightLineBound: bound,
		certificate,
		method,
	};
}
