import { type LegProblem, PLANNER_VERSION, type Plan } from "../core/flight/index.ts";
import type { WorkerClient } from "../workers/index.ts";
import type { ReportShare } from "./job-ledger.ts";
import type { Keeper } from "./keeper.ts";

/** Plans by the content of their problem: in memory, and in the browser from one day to the next. */
export interface PlanCache {
	readonly plans: ReadonlyMap<string, Plan>;
	add(plans: ReadonlyMap<string, Plan>): void;
	/** Sees to it that every problem has its plan; those that are missing are planned side by side. */
	fill(problems: readonly LegProblem[], signal: AbortSignal, report: ReportShare): Promise<void>;
	/** How many of them would have to be planned or looked up. */
	countMissing(problems: readonly LegProblem[]): number;
	clear(): void;
}

/** Plans kept in memory beside those in use. */
const MOST_IN_MEMORY = 300;

export function createPlanCache(workers: WorkerClient, keeper: Keeper): PlanCache {
	const plans = new Map<string, Plan>();
	const put = (key: string, plan: Plan): void => {
		plans.delete(key);
		plans.set(key, plan);
	};
	const prune = (inUse: readonly LegProblem[]): void => {
		const used = new Set(inUse.map((problem) => problem.key));
		for (const key of [...plans.keys()]) {
			if (plans.size <= MOST_IN_MEMORY + used.size) break;
			if (!used.has(key)) plans.delete(key);
		}
	};

	return {
		plans,
		add: (more) => {
			for (const [key, plan] of more) {
				put(key, plan);
				keeper.writeShelf("plans", key, plan);
			}
		},
		countMissing: (problems) => problems.filter(({ key }) => !plans.has(key)).length,
		fill: async (problems, signal, report) => {
			const missing = new Map(problems.filter(({ key }) => !plans.has(key)).map((problem) => [problem.key, problem]));
			for (const [key, value] of await keeper.readShelf("plans", [...missing.keys()])) {
				const problem = missing.get(key);
				// Looked at for its shape only: that it flies is never believed, the check proves it again.
				if (problem === undefined || !isPlanFor(value, problem)) continue;
				put(key, value);
				missing.delete(key);
			}
			const shares = new Map([...missing.keys()].map((key) => [key, 0]));
			const tell = (): void => {
				const done = [...shares.values()].reduce((sum, share) => sum + share, 0);
				const whole = [...shares.values()].filter((share) => share === 1).length;
				report(done / shares.size, `${whole} of ${shares.size} flights planned`);
			};
			if (missing.size > 0) tell();
			await Promise.all(
				[...missing.values()].map(async (problem) => {
					const onProgress = (share: number | null): void => {
						shares.set(problem.key, Math.min(share ?? 0, 0.99));
						tell();
					};
					const plan = await workers.run("plan", { problem }, { signal, onProgress });
					put(problem.key, plan);
					keeper.writeShelf("plans", problem.key, plan);
					shares.set(problem.key, 1);
					tell();
				}),
			);
			prune(problems);
		},
		clear: () => plans.clear(),
	};
}

/** True where a value has the shape of a plan for that many drones, made by this planner. */
export function isPlanFor(value: unknown, problem: Pick<LegProblem, "from">): value is Plan {
	if (value === null || typeof value !== "object") return false;
	const { version, target, degree, paths, law, shortest } = value as Partial<Plan>;
	const drones = problem.from.length / 3;
	return (
		version === PLANNER_VERSION &&
		target instanceof Int32Array &&
		target.length === drones &&
		typeof degree === "number" &&
		paths instanceof Float64Array &&
		paths.length === drones * 3 * (degree + 1) &&
		law?.borders instanceof Float64Array &&
		law.coefficients instanceof Float64Array &&
		Number.isFinite(shortest)
	);
}
