import { dronePositions, type ShowFlight } from "../flight/index.ts";
import type { Show } from "../show/index.ts";
import { proveRows, type RowProof } from "./prove-rows.ts";

/** Rows a second beyond which no flight path is written. */
const FINEST = 100;

export interface ProvenRate {
	/** Rows a second at which the file is proven; null where no rate up to 100 is. */
	readonly rate: number | null;
	readonly proof: RowProof;
	/** What has to be said: a raised rate, or why none will do. */
	readonly notes: readonly string[];
}

/**
 * Proves the interpolated file at the rate that was asked for, and at twice that rate until it holds: the chord error
 * falls with the square of the time between rows.
 */
export function proveRate(
	show: Show,
	flight: ShowFlight,
	asked: number,
	onProgress: (share: number) => void = () => {},
): ProvenRate {
	for (let rate = asked; ; rate = Math.min(2 * rate, FINEST)) {
		const source = {
			drones: flight.drones,
			rate,
			first: Math.floor(flight.begins * rate),
			last: Math.ceil(flight.ends * rate),
			ground: flight.ground,
			positionsAt: (seconds: number, out: Float64Array): void => dronePositions(flight, seconds, out),
		};
		const proof = proveRows(source, show.fleet.limits, onProgress);
		if (proof.broken.length === 0) {
			const raised = `Flight paths hold ${rate} rows a second instead of ${asked}: straight flight between rows that far apart would have broken spacing.`;
			return { rate, proof, notes: rate === asked ? [] : [raised] };
		}
		if (rate >= FINEST) {
			const why = `No flight paths are written: even at ${rate} rows a second ${proof.broken.join("; ")}.`;
			return { rate: null, proof, notes: [why] };
		}
	}
}
