import type { Samples } from "../core/decode/index.ts";
import type { RoughCut, RoughCutOptions } from "../core/draft/index.ts";
import type {
	Care,
	FoundRemedy,
	Leg,
	LegProblem,
	LegTraces,
	Plan,
	ProofCache,
	RemedySearch,
	ShowCheck,
	ShowFlight,
} from "../core/flight/index.ts";
import type { HandoffOptions } from "../core/handoff/index.ts";
import type { Flash } from "../core/light/index.ts";
import type { Analysis } from "../core/music/index.ts";
import type { AnchorPair, EditMap } from "../core/retime/index.ts";
import {
	type Curve,
	createBeatMap,
	endOfShow,
	type Fleet,
	type FleetSlots,
	type Limits,
	type PackedShow,
	type Show,
	type Soundtrack,
	type Venue,
} from "../core/show/index.ts";

/**
 * Everything that runs in a worker, each a plain call into the core: the same functions run on the command line and in
 * tests. Asks and answers are plain data and typed arrays. Each job fetches its part of the core when it is first asked
 * for, so that a worker that only plans never loads a decoder.
 */
export type Report = (share: number | null, stage: string) => void;

export interface AnalyseAsk {
	/** Base name of the file. */
	readonly name: string;
	readonly bytes: Uint8Array;
	/** Decoded already (what only a browser decodes); else null. */
	readonly samples: Samples | null;
	/** An analysis that was kept, of the soundtrack with this hash; null: listen anew. */
	readonly known: { readonly sha256: string; readonly analysis: Analysis } | null;
}

export interface AnalyseAnswer {
	readonly soundtrack: Soundtrack;
	readonly samples: Samples;
	readonly analysis: Analysis;
}

async function analyse(ask: AnalyseAsk, report: Report): Promise<AnalyseAnswer> {
	const [{ decodeAudio }, { ANALYSIS_VERSION, analyse }, { sha256Hex }] = await Promise.all([
		import("../core/decode/index.ts"),
		import("../core/music/index.ts"),
		import("../core/maths/index.ts"),
	]);
	report(null, "decoding");
	const samples = ask.samples ?? (await decodeAudio(ask.bytes, ask.name));
	const sha256 = sha256Hex(ask.bytes);
	const { sampleRate, channels } = samples;
	const soundtrack: Soundtrack = {
		file: ask.name,
		sha256,
		duration: channels[0].length / sampleRate,
		sampleRate,
		channels: channels.length,
	};
	const known =
		ask.known?.sha256 === sha256 && ask.known.analysis.version === ANALYSIS_VERSION ? ask.known.analysis : null;
	return { soundtrack, samples, analysis: known ?? analyse(samples, { onProgress: report }) };
}

export interface LayAnswer {
	readonly slots: Map<string, FleetSlots>;
	readonly ground: Float64Array;
	readonly problems: LegProblem[];
}

/** Slots of every formation, the take-off grid, and the legs that have to be planned. */
async function lay({ show }: { readonly show: Show }): Promise<LayAnswer> {
	const [{ fleetSlotsOf, takeoffSlots }, { legProblems }] = await Promise.all([
		import("../core/formation/index.ts"),
		import("../core/flight/index.ts"),
	]);
	const slots = fleetSlotsOf(show);
	const ground = takeoffSlots(show);
	return { slots, ground, problems: legProblems(show, slots, ground) };
}

async function plan({ problem }: { readonly problem: LegProblem }, report: Report): Promise<Plan> {
	const { planLeg } = await import("../core/flight/index.ts");
	return planLeg(problem, report);
}

export interface AssembleAsk {
	readonly show: Show;
	readonly slots: ReadonlyMap<string, FleetSlots>;
	readonly ground: Float64Array;
	readonly plans: ReadonlyMap<string, Plan>;
}

export interface AssembleAnswer {
	/** The flight without its plans: entry i of `keys` names that of leg i, so that plans needn't cross back. */
	readonly flight: Omit<ShowFlight, "legs"> & { readonly legs: readonly Omit<Leg, "plan">[] };
	readonly keys: readonly string[];
	/** The way back over the take-off grid is only known when all else is planned: it is planned here. */
	readonly plans: ReadonlyMap<string, Plan>;
}

/** Strings planned legs together. */
async function assemble({ show, slots, ground, plans }: AssembleAsk): Promise<AssembleAnswer> {
	const { assembleFlight, legProblems, planLeg } = await import("../core/flight/index.ts");
	const more = new Map<string, Plan>();
	const all = new Map(plans);
	const keys: string[] = [];
	for (const problem of legProblems(show, slots, ground, plans)) {
		keys.push(problem.key);
		if (all.has(problem.key)) continue;
		const plan = planLeg(problem);
		more.set(problem.key, plan);
		all.set(problem.key, plan);
	}
	const flight = assembleFlight(show, slots, ground, all);
	return { flight: { ...flight, legs: flight.legs.map(({ plan: _plan, ...leg }) => leg) }, keys, plans: more };
}

export interface CheckAsk {
	readonly show: Show;
	readonly slots: ReadonlyMap<string, FleetSlots>;
	readonly flight: ShowFlight;
	/** Key of each leg's plan. */
	readonly keys: readonly string[];
	/** Of the music; null where it is not at hand, so that flashes of what follows it can't be judged. */
	readonly curves: readonly Curve[] | null;
}

export interface CheckAnswer {
	readonly check: ShowCheck;
	readonly flashes: readonly Flash[];
}

/** What this worker has proven, with the plans as it knows them: a plan that comes again is told by its content. */
const proofs: ProofCache = new Map();

async function check({ show, slots, flight, keys, curves }: CheckAsk): Promise<CheckAnswer> {
	const [{ checkShow }, { compileLight, findFlashes }] = await Promise.all([
		import("../core/flight/index.ts"),
		import("../core/light/index.ts"),
	]);
	const plans = new Map<string, Plan>();
	const legs = flight.legs.map((leg, index) => {
		const proven = proofs.get(keys[index]);
		const plan = proven !== undefined && samePlan(proven.plan, leg.plan) ? proven.plan : leg.plan;
		plans.set(keys[index], plan);
		return { ...leg, plan };
	});
	const answer = checkShow(show, slots, { ...flight, legs }, plans, proofs);
	for (const key of proofs.keys()) if (!plans.has(key)) proofs.delete(key);
	const light = compileLight(show, flight.stays, slots, curves ?? []);
	const end = endOfShow(show, createBeatMap(show.grid));
	const flashes = findFlashes(light, Math.min(0, flight.begins), Math.max(end, flight.ends));
	return { check: answer, flashes };
}

/** True where two plans fly the same paths by the same law to the last bit. */
function samePlan(a: Plan, b: Plan): boolean {
	const same = (x: ArrayLike<number>, y: ArrayLike<number>): boolean => {
		if (x.length !== y.length) return false;
		for (let i = 0; i < x.length; i++) if (x[i] !== y[i]) return false;
		return true;
	};
	return (
		a.degree === b.degree &&
		a.shortest === b.shortest &&
		same(a.target, b.target) &&
		same(a.paths, b.paths) &&
		same(a.law.borders, b.law.borders) &&
		same(a.law.coefficients, b.law.coefficients)
	);
}

export interface RemediesAsk {
	readonly show: Show;
	readonly slots: ReadonlyMap<string, FleetSlots>;
	readonly flight: ShowFlight;
	readonly check: ShowCheck;
	/** The transition's cue, or the formation. */
	readonly id: string;
	/** Which way is looked for: of a transition one at a time, of a formation all at once. */
	readonly search: RemedySearch | "formation";
}

/** Remedies of what doesn't fly, each planned and proven before it is offered. */
async function remedies({ show, slots, flight, check, id, search }: RemediesAsk): Promise<FoundRemedy[]> {
	const { mendedFormation, searchRemedies } = await import("../core/flight/index.ts");
	if (search === "formation") return mendedFormation(show, slots, flight, check, id);
	return searchRemedies(show, slots, flight, check, id, search);
}

/** What the flight asks beyond its proof. */
async function care({ show, slots, flight }: Pick<CheckAsk, "show" | "slots" | "flight">): Promise<Care> {
	const { careFor } = await import("../core/flight/index.ts");
	return careFor(show, slots, flight);
}

/** What the fleet does over the time of a leg. */
async function traces(ask: { readonly legs: readonly Leg[]; readonly limits: Limits }): Promise<LegTraces> {
	const { traceLegs } = await import("../core/flight/index.ts");
	return traceLegs(ask.legs, ask.limits);
}

export interface MapAsk {
	readonly old: Samples;
	readonly current: Samples;
	/** Places that the designer says are the same. */
	readonly anchors: readonly AnchorPair[];
	/** Old seconds of beats and of bars' first beats. */
	readonly beats: readonly number[];
	readonly downbeats: readonly number[];
}

/** Which stretch of the old soundtrack became which of the new one. */
async function mapEdit({ old, current, anchors, beats, downbeats }: MapAsk, report: Report): Promise<EditMap> {
	const retime = await import("../core/retime/index.ts");
	return retime.mapEdit(old, current, { anchors, beats, downbeats, onProgress: report });
}

export interface DraftAsk {
	readonly analysis: Analysis;
	readonly soundtrack: Soundtrack;
	readonly options: RoughCutOptions;
}

async function draft({ analysis, soundtrack, options }: DraftAsk, report: Report): Promise<RoughCut> {
	const { roughCut } = await import("../core/draft/index.ts");
	return roughCut(analysis, soundtrack, options, report);
}

export interface HandOffAsk {
	readonly show: Show;
	readonly slots: ReadonlyMap<string, FleetSlots>;
	readonly flight: ShowFlight;
	readonly check: ShowCheck;
	/** Null: worked out on the way. */
	readonly care: Care | null;
	readonly curves: readonly Curve[];
	readonly options: HandoffOptions;
}

export interface HandOffAnswer {
	/** The whole hand-off as one zip; null where the show can't be flown and no draft was asked for. */
	readonly zip: Uint8Array | null;
	readonly files: readonly { readonly name: string; readonly size: number }[];
	readonly revision: string;
	readonly draft: boolean;
	readonly notes: readonly string[];
}

async function handoff(ask: HandOffAsk, report: Report): Promise<HandOffAnswer> {
	const [{ handOff }, { careFor }, { compileLight }, { zipSync }] = await Promise.all([
		import("../core/handoff/index.ts"),
		import("../core/flight/index.ts"),
		import("../core/light/index.ts"),
		import("fflate"),
	]);
	const { show, flight, check, options } = ask;
	const light = compileLight(show, flight.stays, new Map(ask.slots), ask.curves);
	const care = ask.care ?? careFor(show, ask.slots, flight);
	const { files, revision, draft, notes } = handOff({ show, flight, check, care, light }, options, report);
	const zip =
		files.length === 0
			? null
			: zipSync(Object.fromEntries(files.map(({ name, bytes }) => [name, bytes])), {
					// Zip has no times before 1980; a fixed one lets equal shows give equal bytes.
					mtime: "1980-01-01T00:00:00",
				});
	return { zip, files: files.map(({ name, bytes }) => ({ name, size: bytes.length })), revision, draft, notes };
}

/** Bytes of a `*.starstave.json` or a `*.starstave` → show, with the soundtrack that lies beside it. */
async function read({ bytes }: { readonly bytes: Uint8Array }): Promise<PackedShow> {
	const { readShow, unpackShow } = await import("../core/show/index.ts");
	const isZip = bytes[0] === 0x50 && bytes[1] === 0x4b;
	if (isZip) return unpackShow(bytes);
	return { show: readShow(new TextDecoder().decode(bytes)), soundtrack: null };
}

/** The other way: a zip where there is a soundtrack to lie beside it, else plain JSON. */
async function write(ask: PackedShow): Promise<Uint8Array> {
	const { packShow, writeShow } = await import("../core/show/index.ts");
	return ask.soundtrack === null ? new TextEncoder().encode(writeShow(ask.show)) : packShow(ask);
}

export interface ReadShapeAsk {
	/** The file's, and what the formation will be called. */
	readonly name: string;
	readonly title: string;
	readonly text: string;
	readonly fleet: Pick<Fleet, "count" | "limits">;
	readonly venue: Venue;
}

/** An SVG drawing or points as CSV → what a new formation is made of, where the fleet can stand in it. */
async function readShape({ name, title, text, fleet, venue }: ReadShapeAsk) {
	const { readPointsCsv, readSvg, settleShape } = await import("../core/formation/index.ts");
	const isSvg = text.trimStart().startsWith("<");
	const { shape, ...rest } = isSvg ? { shape: readSvg(text, name, { count: fleet.count }) } : readPointsCsv(text, name);
	return { ...rest, ...settleShape(shape, fleet.limits, venue, title) };
}

export const jobs = {
	analyse,
	lay,
	plan,
	assemble,
	check,
	care,
	remedies,
	traces,
	mapEdit,
	draft,
	handoff,
	read,
	write,
	readShape,
};

export type JobKind = keyof typeof jobs;
export type JobAsk<K extends JobKind> = Parameters<(typeof jobs)[K]>[0];
export type JobAnswer<K extends JobKind> = Awaited<ReturnType<(typeof jobs)[K]>>;
