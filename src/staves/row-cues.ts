import type { TransitionCheck, Verdict } from "../core/flight/index.ts";
import {
	type BeatMap,
	type ColourCue,
	type Cue,
	type Curve,
	cuePosition,
	type IntensityCue,
	type Show,
	type TransitionCue,
} from "../core/show/index.ts";

/** A transition as it is drawn: outline = time it has, fill = time it needs. Positions in beats. */
export interface Beam {
	readonly id: string;
	readonly number: string;
	readonly called: boolean;
	readonly to: string;
	readonly departs: number;
	readonly arrives: number;
	/** Where it would have to arrive; null where unknown or where no duration works. */
	readonly needs: number | null;
	/** Beats too short, for the words at the arrow; 0 where it fits. */
	readonly short: number;
	/** Null: not checked yet. */
	readonly verdict: Verdict | null;
	readonly selected: boolean;
}

/** A formation that stands, between two transitions. */
export interface Hold {
	readonly name: string;
	readonly from: number;
	readonly to: number;
}

/** A colour cue's stretch on the ribbon: until the next colour cue of its group. */
export interface RibbonPiece {
	readonly id: string;
	readonly from: number;
	readonly to: number;
	readonly fade: number;
	/** sRGB, from the bottom of the ribbon to its top. */
	readonly colours: readonly string[];
	readonly group: string;
	readonly selected: boolean;
}

/** Intensity over the music: corners of a line, positions in beats, level 0..1 (perceptual, as faders are). */
export interface LevelLine {
	readonly points: readonly { readonly at: number; readonly level: number }[];
	readonly marks: readonly { readonly id: string; readonly at: number; readonly selected: boolean }[];
}

export interface CueScore {
	readonly beams: readonly Beam[];
	readonly holds: readonly Hold[];
	readonly ribbons: readonly RibbonPiece[];
	readonly level: LevelLine;
}

/** Worst first: what is drawn where a transition breaks several things. */
const WEIGHT: readonly Verdict[] = ["out-of-venue", "too-close", "too-fast", "tight", "flies"];

export function worstVerdict(verdicts: readonly Verdict[]): Verdict | null {
	return WEIGHT.find((verdict) => verdicts.includes(verdict)) ?? null;
}

/** Everything that the lanes under the waveform show, for the whole show. */
export function scoreCues(
	show: Show,
	beatMap: BeatMap,
	checks: ReadonlyMap<string, TransitionCheck>,
	unchecked: ReadonlySet<string>,
	selected: ReadonlySet<string>,
	curves: readonly Curve[],
): CueScore {
	const cues = show.cues.order.map((id) => show.cues.byId[id]).filter((cue): cue is Cue => cue !== undefined);
	const at = (cue: Cue) => cuePosition(cue, beatMap);
	const sorted = <T extends Cue>(list: T[]): T[] => list.sort((a, b) => at(a) - at(b));
	const transitions = sorted(cues.filter((cue): cue is TransitionCue => cue.kind === "transition"));
	const nameOf = (id: string | null) => (id === null ? "" : show.formations.byId[id]?.name || id);

	const beams = transitions.map((cue): Beam => {
		const check = checks.get(cue.id);
		const departs = at(cue);
		const arrives = departs + cue.length;
		const known = check !== undefined && !unchecked.has(cue.id);
		const needs = check && check.needed !== null ? beatMap.positionAt(beatMap.secondsAt(departs) + check.needed) : null;
		return {
			id: cue.id,
			number: cue.number,
			called: cue.called,
			to: nameOf(cue.formation),
			departs,
			arrives,
			needs,
			short: needs === null ? 0 : Math.max(0, needs - arrives),
			verdict: known ? worstVerdict(check.verdicts) : null,
			selected: selected.has(cue.id),
		};
	});
	const holds: Hold[] = [];
	let name = nameOf(show.opening);
	let from = Number.NEGATIVE_INFINITY;
	for (const beam of beams) {
		holds.push({ name, from, to: beam.departs });
		name = beam.to;
		from = beam.arrives;
	}
	holds.push({ name, from, to: Number.POSITIVE_INFINITY });

	return {
		beams,
		holds,
		ribbons: ribbonsOf(sorted(cues.filter((cue): cue is ColourCue => cue.kind === "colour")), at, show, selected),
		level: levelOf(
			sorted(cues.filter((cue): cue is IntensityCue => cue.kind === "intensity" && cue.group === "all")),
			at,
			beatMap,
			curves,
			selected,
		),
	};
}

function ribbonsOf(
	cues: readonly ColourCue[],
	at: (cue: Cue) => number,
	show: Show,
	selected: ReadonlySet<string>,
): RibbonPiece[] {
	return cues.map((cue, i) => {
		const next = cues.slice(i + 1).find((later) => later.group === cue.group || later.group === "all");
		return {
			id: cue.id,
			from: at(cue),
			to: next ? at(next) : Number.POSITIVE_INFINITY,
			fade: cue.fade,
			colours: paintColours(cue, show),
			group: cue.group,
			selected: selected.has(cue.id),
		};
	});
}

/** The colours that a paint puts into the sky, for its place on the ribbon. */
export function paintColours(cue: ColourCue, show: Show): string[] {
	const colours: string[] = [];
	for (const [key, value] of Object.entries(cue.paint)) {
		if (key === "kind") continue;
		for (const part of Array.isArray(value) ? value : [value]) {
			if (typeof part === "string" && /^#[0-9a-f]{6}$/i.test(part)) colours.push(part);
		}
	}
	if (colours.length > 0) return colours;
	// `picture`: the commonest colours of the pictures of the show.
	const counts = new Map<string, number>();
	for (const id of show.formations.order) {
		for (const colour of show.formations.byId[id]?.colours ?? []) counts.set(colour, (counts.get(colour) ?? 0) + 1);
	}
	const common = [...counts].sort((a, b) => b[1] - a[1] || (a[0] < b[0] ? -1 : 1)).slice(0, 4);
	return common.length > 0 ? common.map(([colour]) => colour) : ["#efe7d6"];
}

/** Faders are perceptual: the line's height is the square root of the linear light. */
const fader = (level: number) => Math.sqrt(Math.min(1, Math.max(0, level)));

function levelOf(
	cues: readonly IntensityCue[],
	at: (cue: Cue) => number,
	beatMap: BeatMap,
	curves: readonly Curve[],
	selected: ReadonlySet<string>,
): LevelLine {
	const points: { at: number; level: number }[] = [];
	let shown = 1;
	cues.forEach((cue, i) => {
		const from = at(cue);
		const next = cues[i + 1];
		const to = next ? at(next) : Math.max(from + 1, beatMap.positionAt(600));
		points.push({ at: from, level: fader(shown) });
		const level = cue.level;
		if (typeof level === "number") {
			points.push({ at: Math.min(to, from + cue.fade), level: fader(level) });
			shown = level;
			return;
		}
		const curve = curves.find((candidate) => candidate.name === level.follow);
		const span = level.to - level.from;
		const valueAt = (position: number) => {
			if (!curve || curve.values.length === 0) return level.from + span / 2;
			const index = Math.round(beatMap.secondsAt(position) * curve.rate);
			return level.from + span * curve.values[Math.min(curve.values.length - 1, Math.max(0, index))];
		};
		const end = Math.min(to, curve ? beatMap.positionAt(curve.values.length / curve.rate) : from + 1);
		for (let position = from + cue.fade; position < end; position += 0.25) {
			points.push({ at: position, level: fader(valueAt(position)) });
		}
		shown = valueAt(end);
	});
	const last = points.at(-1);
	if (last) points.push({ at: Number.POSITIVE_INFINITY, level: last.level });
	return { points, marks: cues.map((cue) => ({ id: cue.id, at: at(cue), selected: selected.has(cue.id) })) };
}
