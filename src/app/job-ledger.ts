import type { StoreApi } from "zustand/vanilla";
import type { Job, StudioState } from "./studio-state.ts";

export type ReportShare = (share: number | null, stage: string) => void;

/** Lists what is under way, with progress and a way to end it. */
export interface JobLedger {
	/** @throws what the work throws; the entry goes away either way */
	run<T>(
		name: string,
		work: (signal: AbortSignal, report: ReportShare) => Promise<T>,
		options?: {
			/** Listed only when it takes longer than a blink. */
			readonly quiet?: boolean;
		},
	): Promise<T>;
	cancel(id: string): void;
	cancelAll(): void;
}

/** Progress finer than this changes nothing on the screen. */
const STEP = 0.005;
/** Milliseconds: a blink. */
const BLINK = 300;

export function createJobLedger(store: StoreApi<StudioState>): JobLedger {
	const controllers = new Map<string, AbortController>();
	let last = 0;
	return {
		run: async (name, work, options = {}) => {
			const id = `j${++last}`;
			const controller = new AbortController();
			controllers.set(id, controller);
			let latest: Job = { id, name, share: null, stage: "" };
			const list = (): void => store.setState((state) => ({ jobs: [...state.jobs, latest] }));
			const timer = options.quiet ? setTimeout(list, BLINK) : null;
			if (timer === null) list();
			const report: ReportShare = (share, stage) => {
				const near = share !== null && latest.share !== null && Math.abs(share - latest.share) < STEP;
				if (latest.stage === stage && (near || share === latest.share)) return;
				latest = { ...latest, share, stage };
				if (!store.getState().jobs.some((one) => one.id === id)) return;
				store.setState((state) => ({ jobs: state.jobs.map((one) => (one.id === id ? latest : one)) }));
			};
			try {
				return await work(controller.signal, report);
			} finally {
				if (timer !== null) clearTimeout(timer);
				controllers.delete(id);
				store.setState((state) => ({ jobs: state.jobs.filter((one) => one.id !== id) }));
			}
		},
		cancel: (id) => controllers.get(id)?.abort(),
		cancelAll: () => {
			for (const controller of controllers.values()) controller.abort();
		},
	};
}
