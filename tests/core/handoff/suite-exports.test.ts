import { unzipSync } from "fflate";
import { describe, expect, it } from "vitest";
import { careFor, flyShow } from "../../../src/core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../../../src/core/formation/index.ts";
import { handOff } from "../../../src/core/handoff/index.ts";
import { compileLight } from "../../../src/core/light/index.ts";
import { addCue, addFormation, applyEdit, createShow, type Show } from "../../../src/core/show/index.ts";
import { judgeFlightPaths } from "../../oracles/judge-flight-paths.ts";
import { readTable } from "../../oracles/read-flight-paths.ts";
import { type FormationPair, formationPairs } from "../../problems/formation-pairs.ts";

const DRONES = 30;

/** One pair of the suite as a show: launch, the transition in the time it needs and a little, landing. */
function showOf({ name, from, to }: FormationPair, beats: number): Show {
	const points = (flat: Float64Array): [number, number, number][] =>
		Array.from({ length: flat.length / 3 }, (_, i) => [flat[3 * i], flat[3 * i + 1], flat[3 * i + 2]]);
	return applyEdit(createShow(DRONES, name), (draft) => {
		draft.venue.volume = { min: [-200, -100, 0], max: [200, 250, 250] };
		draft.fleet.limits.endurance = 3600;
		addFormation(draft, { id: "from", shape: { kind: "points", points: points(from) } });
		addFormation(draft, { id: "to", shape: { kind: "points", points: points(to) } });
		draft.opening = "from";
		addCue(draft, { kind: "transition", at: 8, length: beats, formation: "to" });
	}).show;
}

describe("flight paths of hard pairs at exactly the spacing, read back from their files", () => {
	for (const pair of formationPairs(DRONES)) {
		it(`hold no violation that an oracle could find: ${pair.name}`, () => {
			let show = showOf(pair, 60);
			const slots = fleetSlotsOf(show);
			const needed = flyShow(show, slots, takeoffSlots(show)).check.transitions[0].needed ?? Number.NaN;
			// Without beats the grid counts 120 a minute: to the next half beat over what is needed.
			show = showOf(pair, Math.ceil(4 * needed + 0.1) / 2);
			const { flight, check } = flyShow(show, slots, takeoffSlots(show));
			expect(check.flies).toBe(true);
			const light = compileLight(show, flight.stays, slots, []);
			const handed = handOff({ show, flight, check, care: careFor(show, slots, flight), light });
			const zip = handed.files.find(({ name }) => name === "flight-paths.zip");
			const files = unzipSync(zip?.bytes ?? new Uint8Array(0));
			const told = JSON.parse(new TextDecoder().decode(files["flight-paths.json"])) as { rates: { positions: number } };
			const verdict = judgeFlightPaths(readTable(files, "positions", told.rates.positions), show.fleet.limits);
			expect(verdict.broken).toEqual([]);
			expect(verdict.drones).toBe(DRONES);
		});
	}
});
