import { availableParallelism } from "node:os";
import { type LegProblem, legProblems, type Plan, planLeg } from "../core/flight/index.ts";
import type { FleetSlots, Show } from "../core/show/index.ts";
import type { WorkerClient } from "../workers/index.ts";
import { createNodeWorkers } from "../workers/node-workers.ts";
import { type Progress, secondsSince } from "./progress.ts";

/** Drones from which starting workers costs less than it saves. */
const WORTH_WORKERS = 400;

/** Plans by key, and how long each took by the id of the leg that asked for it. */
export interface PlannedLegs {
	readonly plans: Map<string, Plan>;
	readonly seconds: Record<string, number>;
}

type PlanOne = (problem: LegProblem) => Promise<Plan>;

/**
 * Plans every leg of a show, side by side in workers where that is worth it; the same plans come out either way.
 * @param known plans by key that need not be made again
 * @param workers false: in this thread, whatever the size
 */
export async function planLegs(
	show: Show,
	slots: ReadonlyMap<string, FleetSlots>,
	ground: Float64Array,
	known: ReadonlyMap<string, Plan>,
	progress: Progress,
	workers = availableParallelism() > 1 && show.fleet.count >= WORTH_WORKERS,
): Promise<PlannedLegs> {
	const plans = new Map<string, Plan>();
	const seconds: Record<string, number> = {};
	let client: WorkerClient | null = null;
	const planInWorker: PlanOne = (problem) => {
		// Commands are bundled into chunks/, one below the worker.
		client ??= createNodeWorkers(new URL("../worker.mjs", import.meta.url));
		return client.run("plan", { problem });
	};
	const planHere: PlanOne = async (problem) => planLeg(problem);
	const planOne = workers ? planInWorker : planHere;
	try {
		// Twice: the way back over the take-off grid depends on where all other legs leave each drone.
		for (let round = 0; round < 2; round++) {
			const waiting = new Map<string, LegProblem>();
			for (const problem of legProblems(show, slots, ground, plans)) {
				const kept = known.get(problem.key);
				if (kept !== undefined) plans.set(problem.key, kept);
				else if (!plans.has(problem.key) && !waiting.has(problem.key)) waiting.set(problem.key, problem);
			}
			let done = 0;
			const all = waiting.size;
			progress.tell(0, "planning");
			await runSideBySide([...waiting.values()], workers ? Math.min(4, availableParallelism()) : 1, async (problem) => {
				const start = performance.now();
				plans.set(problem.key, await planOne(problem));
				seconds[problem.id] = (seconds[problem.id] ?? 0) + secondsSince(start);
				progress.tell(++done / all, "planning");
			});
		}
	} finally {
		(client as WorkerClient | null)?.close();
	}
	return { plans, seconds };
}

/** Never more than `most` at a time, so that what is measured is the work and not the wait for it. */
async function runSideBySide<T>(items: readonly T[], most: number, run: (item: T) => Promise<void>): Promise<void> {
	const queue = items[Symbol.iterator]();
	const lane = async (): Promise<void> => {
		for (let next = queue.next(); next.done !== true; next = queue.next()) await run(next.value);
	};
	await Promise.all(Array.from({ length: most }, lane));
}
