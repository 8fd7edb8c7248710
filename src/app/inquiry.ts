import type { StoreApi } from "zustand/vanilla";
import {
	bestFirst,
	type FoundRemedy,
	type LegTraces,
	type Plan,
	REMEDY_SEARCHES,
	type Remedy,
	type RemedySearch,
	type ShowCheck,
} from "../core/flight/index.ts";
import type { Show } from "../core/show/index.ts";
import type { WorkerClient } from "../workers/index.ts";
import type { JobLedger, ReportShare } from "./job-ledger.ts";
import { isCancelled, type Notices } from "./notices.ts";
import type { Inquired, StudioState } from "./studio-state.ts";

/** Looks more closely into one part of the show, at what takes too long to be asked of every part. */
export interface Inquiry {
	/** From now on, and after each check anew, until another part is asked about; null: nothing. */
	lookInto(part: Inquired["part"] | null): void;
	/** Plans that were made for a remedy, so that applying it plans nothing again. */
	plansOf(remedy: Remedy): ReadonlyMap<string, Plan>;
	/** Settles when nothing more is being looked for. */
	settled(): Promise<void>;
}

export interface InquiryParts {
	readonly store: StoreApi<StudioState>;
	readonly workers: WorkerClient;
	readonly ledger: JobLedger;
	readonly notices: Notices;
}

type Search = RemedySearch | "formation";

interface Answer {
	readonly traces: LegTraces | null;
	readonly remedies: readonly Remedy[];
}

/** Milliseconds of quiet before anything is looked for: a drag checks many times a second. */
const QUIET = 200;
const NO_PATHS = new Float64Array(0);
/** Answers that are kept: going back to a cue, or undoing, asks nothing again. */
const MOST_KEPT = 60;

export function createInquiry({ store, workers, ledger, notices }: InquiryParts): Inquiry {
	const kept = new Map<string, Answer>();
	const plans = new WeakMap<Remedy, ReadonlyMap<string, Plan>>();
	let part: Inquired["part"] | null = null;
	let under: AbortController | null = null;
	let timer: ReturnType<typeof setTimeout> | null = null;
	let running: Promise<void> = Promise.resolve();

	const put = (answer: Answer, searching: boolean): void => {
		if (part !== null) store.setState({ inquired: { part, ...answer, searching } });
	};

	const stop = (): void => {
		under?.abort();
		under = null;
		if (timer !== null) clearTimeout(timer);
		timer = null;
	};

	/** One part of the show as it is checked; what is found is shown as it comes. */
	const look = async (asked: Inquired["part"], signal: AbortSignal): Promise<void> => {
		const { show, slots, flight, check } = store.getState();
		if (show === null || slots === null || flight === null || check === null) return;
		const key = keyOf(show, asked);
		const known = kept.get(key);
		if (known !== undefined) return put(known, false);
		let answer: Answer = { traces: null, remedies: [] };
		const take = (found: readonly FoundRemedy[]): void => {
			for (const one of found) plans.set(one.remedy, one.plans);
			answer = { ...answer, remedies: bestFirst([...answer.remedies, ...found.map(({ remedy }) => remedy)]) };
		};
		put(answer, true);
		const legs = flight.legs.filter(({ id }) => asked.kind === "leg" && id === asked.id);
		if (legs.length > 0) {
			const traces = await workers.run("traces", { legs, limits: show.fleet.limits }, { signal, urgent: true });
			answer = { ...answer, traces };
		}
		const searches = searchesFor(asked, check);
		if (searches.length > 0) {
			put(answer, true);
			// Paths are by far the most of a flight, and remedies plan anew: a show of many transitions crosses in no time.
			const slim = { ...flight, legs: flight.legs.map((leg) => ({ ...leg, plan: { ...leg.plan, paths: NO_PATHS } })) };
			const find = async (cancelled: AbortSignal, report: ReportShare): Promise<void> => {
				// One after the other, so that planning always finds a worker free.
				for (const [k, search] of searches.entries()) {
					report(k / searches.length, searchName(search));
					const ask = { show, slots, flight: slim, check, id: asked.id, search };
					take(await workers.run("remedies", ask, { signal: AbortSignal.any([signal, cancelled]) }));
					put(answer, true);
				}
			};
			try {
				await ledger.run("Looking for remedies", find, { quiet: true });
			} catch (error) {
				// Ended by hand: what was found until then stands.
				if (signal.aborted || !isCancelled(error)) throw error;
				return put(answer, false);
			}
		}
		kept.set(key, answer);
		for (const old of kept.keys()) {
			if (kept.size <= MOST_KEPT) break;
			kept.delete(old);
		}
		put(answer, false);
	};

	const start = (): void => {
		stop();
		const { check, unchecked, inquired } = store.getState();
		if (part === null) {
			if (inquired !== null) store.setState({ inquired: null });
			return;
		}
		const asked = part;
		const same = inquired !== null && inquired.part.kind === asked.kind && inquired.part.id === asked.id;
		if (!same) store.setState({ inquired: { part: asked, traces: null, remedies: [], searching: true } });
		if (check === null || unchecked.size > 0) {
			if (same && inquired.remedies.length > 0)
				store.setState({ inquired: { ...inquired, remedies: [], searching: true } });
			return;
		}
		timer = setTimeout(
			() => {
				const controller = new AbortController();
				under = controller;
				running = look(asked, controller.signal).catch((error) => {
					if (!isCancelled(error)) notices.sayError(error, "inquiry");
				});
			},
			same ? QUIET : 0,
		);
	};

	store.subscribe((state, before) => {
		if (part !== null && (state.check !== before.check || state.unchecked !== before.unchecked)) start();
		else if (part !== null && state.show !== before.show) stop();
	});

	return {
		lookInto: (next) => {
			if (next?.kind === part?.kind && next?.id === part?.id) return;
			part = next;
			start();
		},
		plansOf: (remedy) => plans.get(remedy) ?? new Map(),
		settled: async () => {
			while (timer !== null && under === null) await new Promise((resolve) => setTimeout(resolve, 20));
			await running;
		},
	};
}

function searchesFor(asked: Inquired["part"], check: ShowCheck): readonly Search[] {
	const bad = (one: { readonly id: string; readonly verdicts: readonly string[] }): boolean =>
		one.id === asked.id && !one.verdicts.includes("flies");
	if (asked.kind === "formation") return check.formations.some(bad) ? ["formation"] : [];
	return check.transitions.some(bad) ? REMEDY_SEARCHES : [];
}

function searchName(search: Search): string {
	const names: Record<Search, string> = {
		shrink: "a smaller picture",
		nearer: "pictures nearer together",
		turn: "a picture turned",
		spread: "a picture drawn apart",
		way: "by way of another formation",
		formation: "a formation that stands",
	};
	return names[search];
}

/** All that an answer follows from. */
function keyOf(show: Show, asked: Inquired["part"]): string {
	const { grid, fleet, venue, takeoff, opening, formations, cues } = show;
	const transitions = cues.order.map((id) => cues.byId[id]).filter(({ kind }) => kind === "transition");
	return JSON.stringify([asked, grid, fleet, venue, takeoff, opening, formations, transitions]);
}
