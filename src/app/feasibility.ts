import type { StoreApi } from "zustand/vanilla";
import { assembleFlight, type LegProblem, type Plan, type ShowCheck } from "../core/flight/index.ts";
import { compileLight } from "../core/light/index.ts";
import { createBeatMap, endOfShow, type FleetSlots, type Show } from "../core/show/index.ts";
import type { Player } from "../platform/player.ts";
import type { WorkerClient } from "../workers/index.ts";
import type { JobLedger } from "./job-ledger.ts";
import type { Keeper } from "./keeper.ts";
import { basisOf, changedLegs, type LegBasis, sameBasis } from "./leg-basis.ts";
import { isCancelled, type Notices } from "./notices.ts";
import { createPlanCache } from "./plan-cache.ts";
import { redateCheck } from "./redate-check.ts";
import type { StudioState } from "./studio-state.ts";

/**
 * Keeps slots, flight, light and check in step with the show. What follows from times alone (a cue dragged, a fade
 * changed) is there at once, from plans that are known; what asks for planning or proof runs in workers.
 */
export interface Feasibility {
	/** The show has changed. */
	refresh(): void;
	/** The show changes many times a second: only what is there at once, until `refresh`. */
	follow(): void;
	/** Everything is proven anew. */
	again(): void;
	/** Plans that were made elsewhere (by the rough cut). */
	takePlans(plans: ReadonlyMap<string, Plan>): void;
	/** Another show stands here. */
	reset(): void;
	/** Settles when all that the last change asked for is done, or can't be done. */
	settled(): Promise<void>;
}

export interface FeasibilityParts {
	readonly store: StoreApi<StudioState>;
	readonly workers: WorkerClient;
	readonly player: Player;
	readonly ledger: JobLedger;
	readonly keeper: Keeper;
	readonly notices: Notices;
}

interface Laid {
	readonly basis: LegBasis;
	readonly slots: Map<string, FleetSlots>;
	readonly ground: Float64Array;
	readonly problems: readonly LegProblem[];
}

/** Milliseconds of quiet before a proof starts. */
const QUIET = 150;
const NONE: ReadonlySet<string> = new Set();

export function createFeasibility({ store, workers, player, ledger, keeper, notices }: FeasibilityParts): Feasibility {
	const cache = createPlanCache(workers, keeper);
	let laid: Laid | null = null;
	/** What the check in the store was made for. */
	let checked: LegBasis | null = null;
	/** Rises with every change, so that an answer to an older question is known as such. */
	let turn = 0;
	let running: Promise<void> | null = null;
	let retried = false;
	let planning: { readonly basis: LegBasis; readonly superseded: AbortController } | null = null;

	const clear = (): void => {
		laid = null;
		checked = null;
		store.setState({ slots: null, ground: null, flight: null, light: null, check: null, unchecked: NONE });
	};

	/** Flight and light from known plans, if all are known. @returns whether they were */
	const assemble = (show: Show): boolean => {
		if (laid === null || cache.countMissing(laid.problems) > 0 || !sameBasis(laid.basis, basisOf(show))) return false;
		const { slots, ground } = laid;
		const flight = assembleFlight(show, slots, ground, new Map(cache.plans));
		const light = compileLight(show, flight.stays, slots, store.getState().analysis?.curves ?? []);
		store.setState({ slots, ground, flight, light });
		player.setSpan(Math.min(0, flight.begins), Math.max(endOfShow(show, createBeatMap(show.grid)), flight.ends));
		return true;
	};

	/** All that can be said without a worker. */
	const follow = (): void => {
		turn++;
		const { show, check } = store.getState();
		if (show === null) {
			clear();
			return;
		}
		const basis = basisOf(show);
		try {
			assemble(show);
		} catch (error) {
			notices.sayError(error, "feasibility");
		}
		store.setState({ check: check && redateCheck(check, show), unchecked: changedLegs(checked, basis) });
		// Planning for formations that have changed again is a waste.
		if (planning !== null && !sameBasis(planning.basis, basis)) planning.superseded.abort();
	};

	const lay = async (show: Show): Promise<Laid> => {
		const basis = basisOf(show);
		const { slots, ground, problems } = await workers.run("lay", { show }, { urgent: true });
		return { basis, slots, ground, problems };
	};

	/** @returns false where the formations changed meanwhile */
	const planLegs = async ({ basis, problems }: Laid): Promise<boolean> => {
		const superseded = new AbortController();
		planning = { basis, superseded };
		try {
			await ledger.run(
				"Planning the flight",
				(signal, report) => cache.fill(problems, AbortSignal.any([signal, superseded.signal]), report),
				{ quiet: true },
			);
			return true;
		} catch (error) {
			if (superseded.signal.aborted && isCancelled(error)) return false;
			throw error;
		} finally {
			planning = null;
		}
	};

	const prove = async (show: Show): Promise<ShowCheck> => {
		const { flight, slots, ground } = store.getState();
		const plans = new Map(laid!.problems.map(({ key }) => [key, cache.plans.get(key)!]));
		return ledger.run(
			"Proving the flight",
			(signal) => workers.run("check", { show, slots: slots!, flight: flight!, ground: ground!, plans }, { signal }),
			{ quiet: true },
		);
	};

	/** One round. @returns false where the show changed meanwhile, so that another is due */
	const round = async (): Promise<boolean> => {
		const started = turn;
		const { show } = store.getState();
		if (show === null || show.opening === null) {
			clear();
			return true;
		}
		if (laid === null || !sameBasis(laid.basis, basisOf(show))) {
			const next = await lay(show);
			if (started !== turn) return false;
			laid = next;
		}
		if (cache.countMissing(laid.problems) > 0 && !(await planLegs(laid))) return false;
		if (started !== turn) return false;
		if (!assemble(show)) return false;
		notices.dismiss("feasibility");
		await new Promise((resolve) => setTimeout(resolve, QUIET));
		if (started !== turn) return false;
		const basis = laid.basis;
		const check = await prove(show);
		if (started !== turn) return false;
		checked = basis;
		store.setState({ check, unchecked: NONE });
		return true;
	};

	const run = async (): Promise<void> => {
		for (;;) {
			try {
				if (await round()) {
					retried = false;
					return;
				}
			} catch (error) {
				if (isCancelled(error)) {
					notices.say(
						"caution",
						"Planning was cancelled: verdicts are open until the show is checked again.",
						"feasibility",
					);
					return;
				}
				// A plan from the browser's own store may be for another problem than its key says: plan anew, once.
				if (!retried) {
					retried = true;
					cache.clear();
					laid = null;
					continue;
				}
				retried = false;
				notices.sayError(error, "feasibility");
				return;
			}
		}
	};

	const start = (): void => {
		running ??= run().finally(() => {
			running = null;
		});
	};

	return {
		refresh: () => {
			follow();
			start();
		},
		follow,
		again: () => {
			checked = null;
			laid = null;
			follow();
			start();
		},
		takePlans: cache.add,
		reset: clear,
		settled: async () => {
			while (running !== null) await running;
		},
	};
}
