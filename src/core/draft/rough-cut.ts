import { type FlownShow, flyShow, type LegProblem, type Plan, type ProofCache, planLeg } from "../flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../formation/index.ts";
import { compileLight, findFlashes } from "../light/index.ts";
import type { Analysis } from "../music/index.ts";
import {
	type Cue,
	createShow,
	type FleetSlots,
	type Formation,
	type Limits,
	type Show,
	type Soundtrack,
	toOrdered,
	type Venue,
} from "../show/index.ts";
import { requireInRange } from "../units/index.ts";
import { cutLight } from "./cut-light.ts";
import { fitTransitions, lengthFor, type Turn, windowBefore } from "./fit-transitions.ts";
import { createReach, type Reach } from "./reach.ts";
import { type MusicPlan, readMusic } from "./read-music.ts";
import { breathe, chooseFigures, type Figure } from "./repertoire.ts";

export interface RoughCutOptions {
	readonly drones: number;
	readonly title?: string;
	readonly limits?: Partial<Limits>;
	readonly venue?: Partial<Venue>;
	/** Another number, another cut of the same music. */
	readonly seed?: number;
}

/** The cut and what was found while it was made, so that nobody plans it again. */
export interface RoughCut extends FlownShow {
	readonly show: Show;
	readonly slots: Map<string, FleetSlots>;
	readonly ground: Float64Array;
	/** What the designer should know, as sentences. */
	readonly notes: readonly string[];
}

/** Rounds of planning and fitting. Each takes a turn away or a figure nearer, so few are needed; this is the guard. */
const ROUNDS = 24;
/** Other figures that are tried where a letter's own can't be reached in time. */
const TRIES = 3;

/**
 * A first set of cues made from the analysis, feasible as it stands, to be worked over by hand: a transition at every
 * section boundary at least, arriving so that the picture stands on the downbeat; the same letter looks alike;
 * intensity follows loudness; swells where the music is dense.
 * @throws StarstaveError for a fleet of none or beyond 20 000, or one that no figure in the venue can hold
 */
export function roughCut(
	analysis: Analysis,
	soundtrack: Soundtrack,
	options: RoughCutOptions,
	onProgress?: (share: number, stage: string) => void,
): RoughCut {
	requireInRange("fleet", "The number of drones", options.drones, 1, 20000);
	const music = readMusic(analysis);
	const empty = createShow(options.drones, options.title ?? "");
	const fleet = { ...empty.fleet, limits: { ...empty.fleet.limits, ...options.limits } };
	const venue = { ...empty.venue, ...options.venue };
	const figures = chooseFigures(fleet, venue, options.seed ?? 1);
	const base: Show = { ...empty, soundtrack, fleet, venue, grid: music.grid, sections: music.sections };
	const plans = new Map<string, Plan>();
	const proofs: ProofCache = new Map();
	const expected = 3 * music.sections.length + 6;
	const planOf = (problem: LegProblem): Plan => {
		const known = plans.get(problem.key);
		if (known) return known;
		onProgress?.(Math.min(0.95, plans.size / expected), "Planning transitions");
		const plan = planLeg(problem);
		plans.set(problem.key, plan);
		return plan;
	};
	let turns = layTurns(music, figures, createReach(base, planOf));
	const notes: string[] = [];
	for (let round = 0; ; round++) {
		const show = assemble(base, music, turns, analysis);
		const slots = fleetSlotsOf(show);
		const ground = takeoffSlots(show);
		const flown = flyShow(show, slots, ground, planOf, plans, proofs);
		const fitted = fitTransitions(turns, flown.check.transitions, music.beatMap);
		if (fitted === null || round >= ROUNDS) {
			if (music.grid.beats.length < 2)
				notes.push("No beat was found, so the cut has no transitions: put them in by hand.");
			onProgress?.(1, "Planning transitions");
			return { show: calmFlashes(show, flown, slots, analysis), slots, ground, notes, ...flown };
		}
		turns = fitted;
	}
}

/**
 * Section after section its figure; where the same would stand twice running, and in the midst of long ones, the other
 * of its pair. Where the music gives no time for either, whatever figure can be reached, nearest in energy first; where
 * none can, the picture that stands grows or shrinks a little.
 */
function layTurns(music: MusicPlan, figures: readonly Figure[], reach: Reach): Turn[] {
	const pairs = pairFigures(music.energies, figures);
	const turns: Turn[] = [];
	const turnTo = (at: number, pick: readonly Formation[]) => {
		const before = turns.at(-1);
		if (!before) {
			turns.push({ at, length: 8, formation: pick[0], nearer: false });
			return;
		}
		const window = windowBefore(at, before.at, turns.length === 1);
		for (const formation of pick) {
			if (formation.id === before.formation.id) continue;
			const length = lengthFor(reach.needed(before.formation, formation), at, music.beatMap);
			if (length > window) continue;
			turns.push({ at, length, formation, nearer: false });
			return;
		}
		turns.push({ at, length: Math.max(1, Math.min(4, window)), formation: breathe(before.formation), nearer: true });
	};
	for (const section of music.sections) {
		const energy = music.energies.get(section.letter) ?? 0.5;
		const pair = pairs.get(section.letter) ?? [figures[0].formation];
		const others = figures
			.filter((figure) => !pair.includes(figure.formation))
			.sort((a, b) => Math.abs(a.energy - energy) - Math.abs(b.energy - energy))
			.slice(0, TRIES)
			.map((figure) => figure.formation);
		turnTo(section.from, [...pair, ...others]);
		for (const at of music.turnsOf(section)) turnTo(at, [...pair].reverse().concat(others));
	}
	if (turns.length === 0) turnTo(0, [figures[0].formation]);
	return turns;
}

/** Two figures a letter, near to its energy, no figure for two letters while there are enough. */
function pairFigures(energies: ReadonlyMap<string, number>, figures: readonly Figure[]): Map<string, Formation[]> {
	const pairs = new Map<string, Formation[]>();
	const free = new Set(figures);
	const take = (energy: number, not: Figure | null): Figure => {
		const pool = [...free].filter((figure) => figure !== not);
		const from = pool.length > 0 ? pool : figures.filter((figure) => figure !== not);
		const best = (from.length > 0 ? from : figures).reduce((a, b) =>
			Math.abs(b.energy - energy) < Math.abs(a.energy - energy) ? b : a,
		);
		free.delete(best);
		return best;
	};
	const firsts = new Map([...energies].map(([letter, energy]) => [letter, take(energy, null)]));
	for (const [letter, energy] of energies) {
		const first = firsts.get(letter) ?? figures[0];
		pairs.set(letter, [first.formation, take(energy, first).formation]);
	}
	return pairs;
}

/** The show that the turns make: the first is the opening, in which the fleet waits dark. */
function assemble(base: Show, music: MusicPlan, turns: readonly Turn[], analysis: Analysis): Show {
	const [opening, ...rest] = turns;
	const formations = new Map<string, Formation>();
	for (const turn of turns) formations.set(turn.formation.id, turn.formation);
	const timed = [
		...rest.map((turn) => ({
			...PLAIN,
			kind: "transition" as const,
			at: turn.at - turn.length,
			length: turn.length,
			formation: turn.formation.id,
			timeLaw: "s-curve" as const,
			light: "keep" as const,
			name: `to ${turn.formation.name}`,
		})),
		...cutLight(music, analysis).map((cue) => ({ ...PLAIN, ...cue })),
	];
	timed.sort((a, b) => a.at - b.at);
	const cues = timed.map((cue, i) => ({ ...cue, id: `c${i + 1}`, number: String(i + 1) }) as Cue);
	return {
		...base,
		opening: opening.formation.id,
		formations: toOrdered([...formations.values()]),
		cues: toOrdered(cues),
	};
}

const PLAIN = { group: "all", called: false, name: "", note: "", length: 0 };

/** Swells give way to gradients in a show that would flash; what is left of flashes is told by the check of light. */
function calmFlashes(show: Show, flown: FlownShow, slots: ReadonlyMap<string, FleetSlots>, analysis: Analysis): Show {
	const program = compileLight(show, flown.flight.stays, slots, analysis.curves);
	if (findFlashes(program, 0, analysis.duration).length === 0) return show;
	const byId = Object.fromEntries(
		Object.entries(show.cues.byId).map(([id, cue]) => [
			id,
			cue.kind === "colour" && cue.paint.kind === "swell"
				? { ...cue, paint: { kind: "flat" as const, colour: cue.paint.colour } }
				: cue,
		]),
	);
	return { ...show, cues: { ...show.cues, byId } };
}
