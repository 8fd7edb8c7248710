import type { StoreApi } from "zustand/vanilla";
import type { ShowFlight } from "../core/flight/index.ts";
import type { FleetSlots, Show } from "../core/show/index.ts";
import type { WorkerClient } from "../workers/index.ts";
import type { JobLedger } from "./job-ledger.ts";
import type { Notices } from "./notices.ts";
import type { StudioState } from "./studio-state.ts";

/** Works out what the flight asks beyond its proof, after the proof, and holds nothing up. */
export interface CareWatch {
	/** The show has been proven as it is now. */
	follow(show: Show, slots: ReadonlyMap<string, FleetSlots>, flight: ShowFlight): void;
	clear(): void;
	settled(): Promise<void>;
}

interface Flown {
	readonly show: Show;
	readonly slots: ReadonlyMap<string, FleetSlots>;
	readonly flight: ShowFlight;
}

export function createCareWatch(
	store: StoreApi<StudioState>,
	workers: WorkerClient,
	ledger: JobLedger,
	notices: Notices,
): CareWatch {
	let waiting: Flown | null = null;
	let answered: Flown | null = null;
	let running: Promise<void> | null = null;
	/** Rises when what runs is wanted no more. */
	let turn = 0;

	const run = async (): Promise<void> => {
		while (waiting !== null) {
			const now: Flown = waiting;
			const started = turn;
			waiting = null;
			try {
				const care = await ledger.run(
					"Working out falls, wakes and lag",
					(signal) => workers.run("care", now, { signal }),
					{ quiet: true },
				);
				if (started !== turn) continue;
				answered = now;
				store.setState({ care });
			} catch (error) {
				if (started === turn) notices.sayError(error, "care");
			}
		}
	};

	return {
		follow: (show, slots, flight) => {
			const next = { show, slots, flight };
			if (waiting === null && running === null && answered !== null && asksTheSame(answered, next)) return;
			waiting = next;
			running ??= run().finally(() => {
				running = null;
			});
		},
		clear: () => {
			turn++;
			waiting = null;
			answered = null;
			store.setState({ care: null });
		},
		settled: async () => {
			while (running !== null) await running;
		},
	};
}

/** Colours, names of cues and the like change nothing of where the fleet is, when, and in what air. */
function asksTheSame(a: Flown, b: Flown): boolean {
	if (a.show.fleet !== b.show.fleet || a.show.venue !== b.show.venue) return false;
	if (a.show.formations !== b.show.formations || a.flight.legs.length !== b.flight.legs.length) return false;
	if (a.flight.begins !== b.flight.begins || a.flight.ends !== b.flight.ends) return false;
	return a.flight.legs.every((leg, k) => {
		const other = b.flight.legs[k];
		return (
			leg.id === other.id &&
			leg.plan === other.plan &&
			leg.departs === other.departs &&
			leg.arrives === other.arrives &&
			(leg.rowOfDrone === other.rowOfDrone || leg.rowOfDrone.every((row, i) => row === other.rowOfDrone[i]))
		);
	});
}
