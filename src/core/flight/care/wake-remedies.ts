import { fillFleet, slotsOf, toMillimetre } from "../../formation/index.ts";
import { smallestGap } from "../../maths/index.ts";
import type { Formation, NewFormation, Show, Wake } from "../../show/index.ts";
import { GAP_TOLERANCE, SPACING_HAIR } from "../../units/index.ts";
import { countAbove, countUnder } from "./wake.ts";

/**
 * A computed change of a formation that leaves fewer drones standing under others. It is checked before it is offered:
 * the formation's own gap and the venue. Transitions to and from it are planned anew when it is taken.
 */
export interface WakeRemedy {
	readonly kind: "tilt" | "offset-rows";
	readonly formation: string;
	/** The change, and what it costs, as sentences. */
	readonly change: string;
	readonly cost: string;
	/** Drones that stand under others before and after. */
	readonly before: number;
	readonly after: number;
	/** Smallest distance in the changed formation, m in the measure of spacing. */
	readonly gap: number;
	/** Fields of the formation to set. */
	readonly edit: Partial<Omit<NewFormation, "id">>;
}

/** Degrees by which a picture is leant over: enough to part its rows, too little for the audience to mind. */
const TILTS = [10, 15, 20];

/** @param before places of the formation as it stands, 3·N metres */
export function wakeRemedies(show: Show, formation: Formation, before: Float64Array): WakeRemedy[] {
	const under = countUnder(countAbove(before, show.fleet.wake));
	if (under === 0) return [];
	return [tilt(show, formation, before, under), offsetRows(show, formation, before, under)].filter(
		(found) => found !== null,
	);
}

/** What a changed formation comes to; null where it breaks spacing or leaves the venue. */
function tryOut(
	show: Show,
	formation: Formation,
): { readonly after: number; readonly gap: number; readonly height: number } | null {
	const { fleet, venue } = show;
	const { limits } = fleet;
	const { all, count } = fillFleet(slotsOf(formation, limits.downwash), fleet, venue);
	const gap = smallestGap(all, limits.downwash).distance;
	if (gap < limits.spacing - GAP_TOLERANCE) return null;
	for (let k = 0; k < all.length; k += 3) {
		const within = ({ min, max }: { min: readonly number[]; max: readonly number[] }): boolean =>
			[0, 1, 2].every((axis) => all[k + axis] >= min[axis] && all[k + axis] <= max[axis]);
		if (!within(venue.volume) || venue.blocked.some(within)) return null;
	}
	return { after: countUnder(countAbove(all, fleet.wake)), gap, height: heightOf(all, count) };
}

/** Metres from the lowest to the highest of the picture's slots. */
function heightOf(places: Float64Array, count: number): number {
	let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
	for (let k = 2; k < 3 * count; k += 3) {
		low = Math.min(low, places[k]);
		high = Math.max(high, places[k]);
	}
	return high - low;
}

/** The smallest tilt that parts all rows, else the one that leaves the fewest drones under others. */
function tilt(show: Show, formation: Formation, places: Float64Array, before: number): WakeRemedy | null {
	const height = heightOf(places, slotsOf(formation, show.fleet.limits.downwash).count);
	let best: WakeRemedy | null = null;
	for (const degrees of TILTS) {
		for (const lean of [-degrees, degrees]) {
			const place = { ...formation.place, tilt: formation.place.tilt + lean };
			const found = tryOut(show, { ...formation, place });
			if (found === null || found.after >= (best?.after ?? before)) continue;
			const away = lean < 0 ? "away from the audience at its head" : "towards the audience at its head";
			best = {
				kind: "tilt",
				formation: formation.id,
				change: `Tilt ${named(formation)} by ${degrees}°, ${away}.`,
				cost: `${left(found.after, before)}; seen from the front it is ${foreshortened(found.height, height)}.`,
				before,
				after: found.after,
				gap: found.gap,
				edit: { place },
			};
			if (found.after === 0) return best;
		}
	}
	return best;
}

/** Slots that stand under others step back, by so many layers as it takes; the formation becomes fixed points. */
function offsetRows(show: Show, formation: Formation, places: Float64Array, before: number): WakeRemedy | null {
	const { wake, limits } = show.fleet;
	const slots = slotsOf(formation, limits.downwash);
	const layers = layersOf(places.subarray(0, 3 * slots.count), wake);
	const step = toMillimetre(wake.radius + SPACING_HAIR);
	const depth = Math.max(...layers) * step;
	if (depth === 0) return null;
	const { position, turn } = formation.place;
	const [cos, sin] = [Math.cos((turn * Math.PI) / 180), Math.sin((turn * Math.PI) / 180)];
	const points = Array.from({ length: slots.count }, (_, i): [number, number, number] => {
		const back = layers[i] * step - depth / 2;
		// Back into the frame of a formation that is only moved: no scale, no tilt, no turn.
		return [
			toMillimetre(places[3 * i] - position[0] - back * sin),
			toMillimetre(places[3 * i + 1] - position[1] + back * cos),
			toMillimetre(places[3 * i + 2] - position[2]),
		];
	});
	const edit = {
		shape: { kind: "points" as const, points },
		place: { ...formation.place, turn: 0, tilt: 0, scale: 1 },
		...(slots.colours === null ? {} : { colours: hexOf(slots.colours) }),
		...(slots.groups.size === 0
			? {}
			: { groups: Object.fromEntries([...slots.groups].map(([name, list]) => [name, [...list]])) }),
	};
	const found = tryOut(show, { ...formation, ...edit });
	if (found === null || found.after >= before) return null;
	return {
		kind: "offset-rows",
		formation: formation.id,
		change: `Offset the rows of ${named(formation)} by ${step.toFixed(2)} m, ${depth.toFixed(2)} m deep in all.`,
		cost: `${left(found.after, before)}; its slots become fixed points, so its ${formation.shape.kind === "text" ? "text" : "shape"} can no longer be changed by its figures.`,
		before,
		after: found.after,
		gap: found.gap,
		edit,
	};
}

/** N: the layer of each slot, from 0 at the top: the lowest in which none above it stands that it is under. */
function layersOf(places: Float64Array, wake: Wake): Int32Array {
	const count = places.length / 3;
	const order = Array.from({ length: count }, (_, i) => i).sort(
		(i, j) => places[3 * j + 2] - places[3 * i + 2] || i - j,
	);
	const layers = new Int32Array(count);
	for (let m = 0; m < count; m++) {
		const i = order[m];
		const used = new Set<number>();
		for (let n = m - 1; n >= 0; n--) {
			const j = order[n];
			if (places[3 * j + 2] - places[3 * i + 2] > wake.reach) break;
			const aside = Math.hypot(places[3 * j] - places[3 * i], places[3 * j + 1] - places[3 * i + 1]);
			if (aside <= wake.radius) used.add(layers[j]);
		}
		while (used.has(layers[i])) layers[i]++;
	}
	return layers;
}

function hexOf(colours: Uint8Array): string[] {
	return Array.from({ length: colours.length / 3 }, (_, i) => {
		const bytes = Array.from(colours.subarray(3 * i, 3 * i + 3), (byte) => byte.toString(16).padStart(2, "0"));
		return `#${bytes.join("")}`;
	});
}

/** "1.5 % lower"; of a picture that lies flat, how high it becomes. */
function foreshortened(after: number, before: number): string {
	if (before < 0.1) return `${after.toFixed(1)} m high`;
	const percent = 100 * (after / before - 1);
	return `${Math.abs(percent).toFixed(1)} % ${percent > 0 ? "higher" : "lower"}`;
}

function named(formation: Formation): string {
	return formation.name === "" ? formation.id : formation.name;
}

function left(after: number, before: number): string {
	return after === 0
		? `None of the ${before} drones stands under another any more`
		: `${after} drones stand under others instead of ${before}`;
}
