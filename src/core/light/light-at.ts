import type { IntensityCue } from "../show/index.ts";
import { smooth } from "./paint-slots.ts";
import type { LightProgram, Scene, TimedCue } from "./program.ts";

/**
 * What every drone shows at an instant.
 *
 * A drone shows what its slot shows. No slot shows anything before the first cue that reaches it: until then the fleet
 * is dark. A colour cue alone lights at full intensity, an intensity cue alone in the formation's own colours or white.
 * Among cues on a slot the later wins, and a fade runs from what the earlier ones show to it.
 *
 * In a transition a drone carries the light of the slot that it left; the light of its new slot takes over in the last
 * quarter of a second (`keep`, `dim`), in the dark half way (`dark`), or over the whole flight (`crossfade`). Who flies
 * into the reserve goes out over the first quarter of the flight, who comes from it lights up on arrival.
 */

/** Seconds before arrival in which a drone takes the light of its new slot: a cut to the eye, no jump to the file. */
const TAKE_OVER = 0.25;

/** Share of a flight in which a drone bound for the reserve goes out. */
const GO_OUT = 0.25;

/** What `dim` leaves of the light, and the longest time in which it sinks or comes back, s. */
const DIMMED = 0.2;
const LONGEST_DIP = 1.2;

/**
 * @param t seconds of the show, any
 * @param out 3·N bytes, sRGB of drone after drone, intensity multiplied in (in linear light)
 */
export function lightAt(program: LightProgram, t: number, out: Uint8Array): void {
	const { scenes, drones, encode } = program;
	out.fill(0, 0, 3 * drones);
	if (scenes.length === 0) return;
	const index = lastArrived(scenes, t);
	const here = scenes[index];
	const next = scenes[index + 1];
	showScene(program, here, t);
	if (next === undefined || t < here.stay.departs) {
		for (let drone = 0; drone < drones; drone++) {
			const slot = here.stay.slotOfDrone[drone];
			if (slot >= here.slots.count) continue;
			const level = here.level[slot];
			for (let k = 0; k < 3; k++) out[3 * drone + k] = encode(here.colour[3 * slot + k] * level);
		}
		return;
	}
	showScene(program, next, t);
	const flight = next.stay.arrives - here.stay.departs;
	const gone = flight > 0 ? (t - here.stay.departs) / flight : 1;
	const left = next.stay.arrives - t;
	const { over, dip } = crossing(next.transition?.light ?? "keep", gone, left, flight);
	const goingOut = 1 - smooth(gone / GO_OUT);
	for (let drone = 0; drone < drones; drone++) {
		const from = here.stay.slotOfDrone[drone];
		const to = next.stay.slotOfDrone[drone];
		const fromLit = from < here.slots.count;
		const toLit = to < next.slots.count;
		if (!fromLit && !toLit) continue;
		const a = fromLit ? here.level[from] * (toLit ? 1 - over : goingOut) : 0;
		const b = toLit ? next.level[to] * over : 0;
		for (let k = 0; k < 3; k++) {
			const linear = (fromLit ? here.colour[3 * from + k] * a : 0) + (toLit ? next.colour[3 * to + k] * b : 0);
			out[3 * drone + k] = encode(linear * dip);
		}
	}
}

/** How much of the new slot's light has taken over, and how much of all light is left. */
function crossing(
	light: "keep" | "dim" | "dark" | "crossfade",
	gone: number,
	left: number,
	flight: number,
): { over: number; dip: number } {
	if (light === "crossfade") return { over: smooth(gone), dip: 1 };
	const over = smooth(1 - left / Math.min(TAKE_OVER, flight));
	if (light === "keep") return { over, dip: 1 };
	const edge = Math.min(LONGEST_DIP, flight / 3);
	const sunk = Math.min(smooth((flight - left) / edge), smooth(left / edge));
	if (light === "dim") return { over, dip: 1 - (1 - DIMMED) * sunk };
	return { over: gone < 0.5 ? 0 : 1, dip: 1 - sunk };
}

/** Index of the last scene whose formation has been reached. */
function lastArrived(scenes: readonly Scene[], t: number): number {
	let low = 0;
	let high = scenes.length;
	while (high - low > 1) {
		const middle = (low + high) >> 1;
		if (scenes[middle].stay.arrives <= t) low = middle;
		else high = middle;
	}
	return low;
}

/** What has reached a slot: nothing yet, a colour cue, or an intensity cue alone. */
const [NOTHING, COLOUR, LEVEL_ALONE] = [0, 1, 2];

/** Writes colour and intensity of each slot into the scene's buffers. */
function showScene(program: LightProgram, scene: Scene, t: number): void {
	const { colour, fresh, level, reached, picture } = scene;
	reached.fill(NOTHING);
	level.fill(0);
	for (let i = bottomOf(program.colours, t); i < program.colours.length; i++) {
		const timed = program.colours[i];
		if (timed.start > t) break;
		const brush = scene.brushOf(timed.cue);
		const members = scene.membersOf(timed.cue.group);
		if (brush === null || members === null) continue;
		const time = seenUntil(program.colours, i, t);
		const share = shareOf(timed, time);
		brush(program.beatMap.positionAt(time) - timed.position, share < 1 ? fresh : colour);
		for (const slot of members) {
			// The first colour that a slot gets doesn't come up through black: there it is the intensity that fades.
			const part = reached[slot] === NOTHING ? 1 : share;
			level[slot] = reached[slot] === NOTHING ? share : level[slot] + (1 - level[slot]) * share;
			reached[slot] = COLOUR;
			if (share === 1) continue;
			for (let k = 3 * slot; k < 3 * slot + 3; k++)
				colour[k] = part === 1 ? fresh[k] : colour[k] + (fresh[k] - colour[k]) * part;
		}
	}
	for (let i = bottomOf(program.levels, t); i < program.levels.length; i++) {
		const timed = program.levels[i];
		if (timed.start > t) break;
		const members = scene.membersOf(timed.cue.group);
		if (members === null) continue;
		const time = seenUntil(program.levels, i, t);
		const share = shareOf(timed, time);
		const wanted = levelOf(program, timed.cue, time);
		for (const slot of members) {
			level[slot] += (wanted - level[slot]) * share;
			if (reached[slot] === NOTHING) reached[slot] = LEVEL_ALONE;
		}
	}
	for (let slot = 0; slot < reached.length; slot++) {
		if (reached[slot] === COLOUR) continue;
		for (let k = 3 * slot; k < 3 * slot + 3; k++) colour[k] = picture[k];
	}
}

function shareOf<C>(timed: TimedCue<C>, t: number): number {
	return timed.full > timed.start ? Math.min(1, Math.max(0, (t - timed.start) / (timed.full - timed.start))) : 1;
}

/** A fade starts from what was shown: a cue stands still from the moment at which the next one begins to cover it. */
function seenUntil<C extends { group: string }>(cues: readonly TimedCue<C>[], index: number, t: number): number {
	const { group } = cues[index].cue;
	for (let i = index + 1; i < cues.length && cues[i].start <= t; i++) {
		if (cues[i].cue.group === "all" || cues[i].cue.group === group) return cues[i].start;
	}
	return t;
}

/** The last cue on `all` that has wholly faded in: what lies below it is not seen. */
function bottomOf<C extends { group: string }>(cues: readonly TimedCue<C>[], t: number): number {
	let low = 0;
	let high = cues.length;
	while (low < high) {
		const middle = (low + high) >> 1;
		if (cues[middle].start <= t) low = middle + 1;
		else high = middle;
	}
	for (let i = low - 1; i > 0; i--) {
		// A fade that was covered half way leaves what lies below it in sight.
		if (cues[i].cue.group === "all" && cues[i].full <= seenUntil(cues, i, t)) return i;
	}
	return 0;
}

function levelOf(program: LightProgram, cue: IntensityCue, t: number): number {
	if (typeof cue.level === "number") return cue.level;
	const { follow, from, to } = cue.level;
	const curve = program.curves.get(follow);
	if (curve === undefined || curve.values.length === 0) return (from + to) / 2;
	const at = Math.min(curve.values.length - 1, Math.max(0, t * curve.rate));
	const low = Math.floor(at);
	const high = Math.min(curve.values.length - 1, low + 1);
	const value = curve.values[low] + (curve.values[high] - curve.values[low]) * (at - low);
	return from + (to - from) * value;
}
