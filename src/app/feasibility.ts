import type { StoreApi } from "zustand/vanilla";
import type { LegProblem, Plan, ShowFlight } from "../core/flight/index.ts";
import { compileLight } from "../core/light/index.ts";
import { createBeatMap, endOfShow, type FleetSlots, type Show } from "../core/show/index.ts";
import { StarstaveError } from "../core/units/index.ts";
import type { Player } from "../platform/player.ts";
import type { JobAnswer, WorkerClient } from "../workers/index.ts";
import { createCareWatch } from "./care-watch.ts";
import type { JobLedger } from "./job-ledger.ts";
import type { Keeper } from "./keeper.ts";
import { basisOf, changedLegs, type LegBasis, sameBasis } from "./leg-basis.ts";
import { moveLegs } from "./move-legs.ts";
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

/** A flight with the show that it was assembled for. */
interface Assembled {
	readonly show: Show;
	readonly basis: LegBasis;
	readonly flight: ShowFlight;
	/** Key of each leg's plan. */
	readonly keys: readonly string[];
}

/** Milliseconds of quiet before a proof starts. */
const QUIET = 150;
const NONE: ReadonlySet<string> = new Set();

export function createFeasibility({ store, workers, player, ledger, keeper, notices }: FeasibilityParts): Feasibility {
	const cache = createPlanCache(workers, keeper);
	const care = createCareWatch(store, workers, ledger, notices);
	let laid: Laid | null = null;
	let assembled: Assembled | null = null;
	/** What the check in the store was made for. */
	let checked: LegBasis | null = null;
	/** Rises with every change, so that an answer to an older question is known as such. */
	let turn = 0;
	let running: Promise<void> | null = null;
	let retried = false;
	let planning: { readonly basis: LegBasis; readonly superseded: AbortController } | null = null;

	const clear = (): void => {
		laid = null;
		assembled = null;
		checked = null;
		care.clear();
		store.setState({ slots: null, ground: null, flight: null, light: null, check: null, flashes: [], unchecked: NONE });
	};

	/** Puts a flight into the store, with the light that goes with it. */
	const put = (show: Show, flight: ShowFlight, slots: ReadonlyMap<string, FleetSlots>): void => {
		const light = compileLight(show, flight.stays, slots, store.getState().analysis?.curves ?? []);
		store.setState({ slots, ground: flight.ground, flight, light });
		player.setSpan(Math.min(0, flight.begins), Math.max(endOfShow(show, createBeatMap(show.grid)), flight.ends));
	};

	/** All that can be said without a worker. */
	const follow = (): void => {
		turn++;
		const { show, check, slots } = store.getState();
		if (show === null) {
			clear();
			return;
		}
		const basis = basisOf(show);
		try {
			if (assembled !== null && slots !== null && sameBasis(assembled.basis, basis)) {
				const flight = moveLegs(assembled.flight, assembled.show, show);
				put(show, flight, slots);
				store.setState({ check: check && redateCheck(check, show, flight) });
			}
		} catch (error) {
			notices.sayError(error, "feasibility");
		}
		store.setState({ unchecked: changedLegs(checked, basis) });
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

	const assemble = async (show: Show, { basis, slots, ground, problems }: Laid): Promise<Assembled> => {
		const known = assembled === null ? [] : assembled.keys;
		const keys = [...problems.map(({ key }) => key), ...known];
		const plans = new Map(keys.flatMap((key) => (cache.plans.has(key) ? [[key, cache.plans.get(key)!] as const] : [])));
		const answer = await workers.run("assemble", { show, slots, ground, plans }, { urgent: true });
		cache.add(answer.plans);
		const legs = answer.flight.legs.map((leg, index) => ({ ...leg, plan: cache.plans.get(answer.keys[index])! }));
		return { show, basis, flight: { ...answer.flight, ground, legs }, keys: answer.keys };
	};

	const prove = (
		show: Show,
		flight: ShowFlight,
		keys: readonly string[],
		slots: ReadonlyMap<string, FleetSlots>,
	): Promise<JobAnswer<"check">> =>
		ledger.run(
			"Proving the flight",
			(signal) => {
				const curves = store.getState().analysis?.curves ?? null;
				return workers.run("check", { show, slots, flight, keys, curves }, { signal });
			},
			{
				quiet: true,
			},
		);

	/** One round. @returns false where the show changed meanwhile, so that another is due */
	const round = async (): Promise<boolean> => {
		const started = turn;
		const { show } = store.getState();
		if (show === null || show.formations.order.length === 0) {
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
		if (assembled === null || !sameBasis(assembled.basis, laid.basis)) {
			const next = await assemble(show, laid);
			if (started !== turn) return false;
			assembled = next;
		}
		const flight = moveLegs(assembled.flight, assembled.show, show);
		put(show, flight, laid.slots);
		notices.dismiss("feasibility");
		await new Promise((resolve) => setTimeout(resolve, QUIET));
		if (started !== turn) return false;
		const { basis } = laid;
		const { check, flashes } = await prove(show, flight, assembled.keys, laid.slots);
		if (started !== turn) return false;
		checked = basis;
		store.setState({ check, flashes, unchecked: NONE });
		care.follow(show, laid.slots, flight);
		return true;
	};

	const run = async (): Promise<void> => {
		for (;;) {
			const asked = turn;
			try {
				if (await round()) {
					retried = false;
					return;
				}
			} catch (error) {
				// What went wrong with a show that has changed since is nobody's concern.
				if (asked !== turn) continue;
				if (isCancelled(error)) {
					const text = "Planning was cancelled: verdicts are open until the show is checked again.";
					notices.say("caution", text, "feasibility");
					return;
				}
				// A plan from the browser's own store may be for another problem than its key says: plan anew, once.
				if (!retried && error instanceof StarstaveError && error.area === "flight") {
					retried = true;
					cache.clear();
					laid = null;
					assembled = null;
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
			assembled = null;
			follow();
			start();
		},
		takePlans: cache.add,
		reset: clear,
		settled: async () => {
			while (running !== null) await running;
			await care.settled();
		},
	};
}
