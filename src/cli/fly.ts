import {
	assembleFlight,
	type Care,
	careFor,
	checkShow,
	legProblems,
	type Plan,
	type ProofCache,
	type ShowCheck,
	type ShowFlight,
} from "../core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../core/formation/index.ts";
import { compileLight, type Flash, findFlashes, type LightProgram } from "../core/light/index.ts";
import { type Curve, createBeatMap, endOfShow, type Show } from "../core/show/index.ts";
import { StarstaveError } from "../core/units/index.ts";
import { planLegs } from "./plan-legs.ts";
import { type Progress, secondsSince } from "./progress.ts";

/** A show with everything that is computed from it. */
export interface Flown {
	readonly show: Show;
	readonly flight: ShowFlight;
	readonly check: ShowCheck;
	readonly care: Care;
	readonly light: LightProgram;
	readonly flashes: readonly Flash[];
	/** What could not be judged, and why. */
	readonly notes: readonly string[];
	/** Seconds by transition id; a plan that serves two of them is counted with the first. */
	readonly timing: { readonly plan: Record<string, number>; readonly prove: Record<string, number> };
}

type Proof = ProofCache extends Map<string, infer P> ? P : never;

/** A cache that tells how long each proof took: it is asked before a proof and filled after it. */
class TimedProofs extends Map<string, Proof> {
	readonly seconds = new Map<string, number>();
	private asked = 0;

	override get(key: string): Proof | undefined {
		this.asked = performance.now();
		return super.get(key);
	}

	override set(key: string, proof: Proof): this {
		this.seconds.set(key, secondsSince(this.asked));
		return super.set(key, proof);
	}
}

/** @throws StarstaveError where there is nothing that could fly */
function requireFleet(show: Show): void {
	if (show.fleet.count === 0) {
		throw new StarstaveError("fleet", "The fleet has 0 drones, so nothing can be flown; give fleet.count at least 1.");
	}
	if (show.formations.order.length === 0) {
		throw new StarstaveError("formation", "The show has no formation, so there is nothing to fly; add at least one.");
	}
	if (show.opening === null) {
		throw new StarstaveError(
			"show",
			`The show names no opening; set opening to the formation in which the fleet waits, ${show.formations.order[0]} for one.`,
		);
	}
}

/**
 * Plans every leg, proves it, and compiles the light.
 * @param curves of the show's soundtrack, or null where the audio is not at hand
 * @param known plans that need not be made again; their time to plan counts as none
 */
export async function flyWhole(
	show: Show,
	curves: readonly Curve[] | null,
	progress: Progress,
	known: ReadonlyMap<string, Plan> = new Map(),
): Promise<Flown> {
	requireFleet(show);
	const slots = fleetSlotsOf(show);
	const ground = takeoffSlots(show);
	const { plans, seconds } = await planLegs(show, slots, ground, known, progress);
	progress.tell(0.9, "proving");
	const proofs = new TimedProofs();
	const flight = assembleFlight(show, slots, ground, plans);
	const check = checkShow(show, slots, flight, plans, proofs);
	const timing: Record<"plan" | "prove", Record<string, number>> = { plan: {}, prove: {} };
	for (const { id, key } of legProblems(show, slots, ground, plans)) {
		timing.plan[id] = seconds[id] ?? 0;
		timing.prove[id] = (timing.prove[id] ?? 0) + (proofs.seconds.get(key) ?? 0);
		proofs.seconds.delete(key);
	}
	progress.tell(0.93, "falls, wakes and lag");
	const care = careFor(show, slots, flight);
	progress.tell(0.97, "light");
	const light = compileLight(show, flight.stays, slots, curves ?? []);
	const end = endOfShow(show, createBeatMap(show.grid));
	const flashes = findFlashes(light, Math.min(0, flight.begins), Math.max(end, flight.ends));
	const notes: string[] = [];
	if (curves === null) {
		notes.push("The soundtrack was not at hand, so flashes of what follows the music can't be judged.");
	}
	return { show, flight, check, care, light, flashes, notes, timing };
}
