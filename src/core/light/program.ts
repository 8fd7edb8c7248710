import {
	type BeatMap,
	type ColourCue,
	type Cue,
	type Curve,
	createBeatMap,
	cuePosition,
	cueTimes,
	type FleetSlots,
	type IntensityCue,
	type Show,
	type Stay,
	type TransitionCue,
} from "../show/index.ts";
import { StarstaveError } from "../units/index.ts";
import { type Brush, type Canvas, createBrush } from "./paint-slots.ts";
import { createEncoder, createLinearTable } from "./srgb.ts";

/** A colour or intensity cue with its times. */
export interface TimedCue<C> {
	readonly cue: C;
	/** Seconds: when its fade begins and ends. */
	readonly start: number;
	readonly full: number;
	/** Beats: where it begins. */
	readonly position: number;
}

/** One formation standing, and what the cues are laid on in it. */
export interface Scene {
	readonly stay: Stay;
	readonly slots: FleetSlots;
	readonly transition: TransitionCue | null;
	/** Slots of a cue's group in this stay; null where it has none here. Worked out when first asked for. */
	membersOf(group: string): Int32Array | null;
	brushOf(cue: ColourCue): Brush | null;
	/** 3·M and M: linear colour and intensity of each slot at the time last asked for. */
	readonly colour: Float32Array;
	readonly level: Float32Array;
	/** 3·M: the paint that is just being mixed in; M: whether a cue has reached the slot (see light-at). */
	readonly fresh: Float32Array;
	readonly reached: Uint8Array;
	/** 3·M linear light of the formation's own colours, white where it has none. */
	readonly picture: Float32Array;
}

/**
 * The show's light, ready to be asked for any instant. Holds buffers of its own: one program serves one caller at a
 * time, and equal questions get equal answers whatever was asked before.
 */
export interface LightProgram {
	/** N. */
	readonly drones: number;
	readonly beatMap: BeatMap;
	/** By the time they start, ties in the order of the list. */
	readonly colours: readonly TimedCue<ColourCue>[];
	readonly levels: readonly TimedCue<IntensityCue>[];
	readonly scenes: readonly Scene[];
	readonly curves: ReadonlyMap<string, Curve>;
	/** Curves that cues follow and that were not given: there the middle between from and to stands in. */
	readonly missingCurves: readonly string[];
	readonly encode: (linear: number) => number;
}

/**
 * @param stays formation after formation, the opening first, as the flight has them
 * @param slots every formation's slots by id
 * @param curves of the music, for intensity that follows; empty where the soundtrack was not analysed
 * @throws StarstaveError for a stay in a formation that has no slots
 */
export function compileLight(
	show: Show,
	stays: readonly Stay[],
	slots: ReadonlyMap<string, FleetSlots>,
	curves: readonly Curve[],
): LightProgram {
	const beatMap = createBeatMap(show.grid);
	const cues = show.cues.order.map((id) => show.cues.byId[id]);
	const colours = timeCues(
		cues.filter((cue): cue is ColourCue => cue.kind === "colour"),
		beatMap,
	);
	const levels = timeCues(
		cues.filter((cue): cue is IntensityCue => cue.kind === "intensity"),
		beatMap,
	);
	const byName = new Map(curves.map((curve) => [curve.name, curve]));
	const followed = levels.flatMap(({ cue }) => (typeof cue.level === "number" ? [] : [cue.level.follow]));
	return {
		drones: show.fleet.count,
		beatMap,
		colours,
		levels,
		scenes: stays.map((stay) => createScene(show, stay, slots)),
		curves: byName,
		missingCurves: [...new Set(followed)].filter((name) => !byName.has(name)),
		encode: createEncoder(),
	};
}

function timeCues<C extends ColourCue | IntensityCue>(cues: readonly C[], beatMap: BeatMap): TimedCue<C>[] {
	const timed = cues.map((cue, index) => {
		const position = cuePosition(cue, beatMap);
		const { start } = cueTimes(cue, beatMap);
		return { cue, start, full: beatMap.secondsAt(position + cue.fade), position, index };
	});
	return timed.sort((a, b) => a.start - b.start || a.index - b.index);
}

function createScene(show: Show, stay: Stay, slots: ReadonlyMap<string, FleetSlots>): Scene {
	const filled = slots.get(stay.formation);
	if (filled === undefined)
		throw new StarstaveError("light", `The light asks for formation ${stay.formation}, which has no slots.`);
	const { count } = filled;
	const linear = createLinearTable();
	const picture = new Float32Array(3 * count).fill(1);
	filled.colours?.forEach((byte, i) => {
		picture[i] = linear[byte];
	});
	const members = new Map<string, Int32Array | null>();
	const membersOf = (group: string): Int32Array | null => {
		const held = members.get(group);
		if (held !== undefined) return held;
		const found = findMembers(show, group, stay, filled);
		members.set(group, found);
		return found;
	};
	const brushes = new Map<string, Brush | null>();
	const brushOf = (cue: ColourCue): Brush | null => {
		const held = brushes.get(cue.id);
		if (held !== undefined) return held;
		const group = membersOf(cue.group);
		const canvas: Canvas | null =
			group === null ? null : { count, positions: filled.positions, picture, members: group };
		const brush = canvas === null ? null : createBrush(cue.paint, canvas);
		brushes.set(cue.id, brush);
		return brush;
	};
	const cue: Cue | undefined = stay.cue === null ? undefined : show.cues.byId[stay.cue];
	return {
		stay,
		slots: filled,
		transition: cue?.kind === "transition" ? cue : null,
		membersOf,
		brushOf,
		colour: new Float32Array(3 * count),
		level: new Float32Array(count),
		fresh: new Float32Array(3 * count),
		reached: new Uint8Array(count),
		picture,
	};
}

/** `all`; else a group of drones, by name; else the formation's slots of that name. Dark drones take no light. */
function findMembers(show: Show, group: string, stay: Stay, slots: FleetSlots): Int32Array | null {
	const { count } = slots;
	if (group === "all") return Int32Array.from({ length: count }, (_, i) => i);
	const drones = show.groups.order.map((id) => show.groups.byId[id]).find((held) => held.name === group)?.drones;
	const members =
		drones !== undefined
			? [...new Set(drones.map((drone) => stay.slotOfDrone[drone]))].filter(
					(slot) => slot !== undefined && slot < count,
				)
			: [...(slots.groups.get(group) ?? [])];
	return members.length === 0 ? null : Int32Array.from(members).sort();
}
