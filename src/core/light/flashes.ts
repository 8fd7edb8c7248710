import { lightAt } from "./light-at.ts";
import type { LightProgram } from "./program.ts";
import { createLinearTable, luminanceOf } from "./srgb.ts";

/**
 * Flashes as WCAG 2.2, success criterion 2.3.1, defines them: a general flash is a pair of opposing changes in
 * relative luminance of a tenth of the maximum or more, the darker state below 0.80; a red flash a pair of opposing
 * changes to or from a saturated red (R ÷ (R + G + B) ≥ 0.8 in linear light) by more than 0.2 in the CIE 1976 UCS
 * diagram. More than three of either within any one second is told.
 *
 * The criterion lets small areas flash. How large a drone's light looks depends on where one stands, so area is left
 * out: one drone that flashes too often is enough. That is stricter than the criterion, never laxer.
 */
export interface Flash {
	readonly kind: "general" | "red";
	/** Seconds: from the first change to the last of a stretch in which every second is over the limit. */
	readonly from: number;
	readonly to: number;
	/** Most flashes within one second. */
	readonly most: number;
	/** How many drones take part, and one of them, from 0. */
	readonly drones: number;
	readonly drone: number;
}

/** Flashes in any one second that are still allowed. */
const ALLOWED = 3;

/** Least change of relative luminance, and the luminance above which the darker state makes it no flash. */
const LEAST_CHANGE = 0.1;
const BRIGHT = 0.8;

/** Saturated red, and the least distance in u′v′. */
const RED_SHARE = 0.8;
const RED_DISTANCE = 0.2;

/** u′v′ of D65: what a dark drone is taken to look like, so that red out of the dark counts. */
const WHITE_U = 0.1978;
const WHITE_V = 0.4683;

/** Samples a second: the finest light table that leaves, so what is judged is what is flown. */
const RATE = 50;

/** Opposing changes of one drone: the times of the last eight, in a ring. Four pairs are one too many. */
const CHANGES = 2 * (ALLOWED + 1);

interface Stretch {
	kind: "general" | "red";
	from: number;
	to: number;
	most: number;
	drones: Set<number>;
}

/**
 * @param from seconds of the show
 * @param to seconds of the show
 * @returns stretches that flash too often, by time; empty where nothing does
 */
export function findFlashes(program: LightProgram, from: number, to: number): Flash[] {
	const { drones } = program;
	const bytes = new Uint8Array(3 * drones);
	const linear = createLinearTable();
	const general = createWatch(drones);
	const red = createWatch(drones);
	const found: Stretch[] = [];
	const samples = Math.max(0, Math.ceil((to - from) * RATE - 1e-9));
	for (let i = 0; i <= samples; i++) {
		const t = Math.min(to, from + i / RATE);
		lightAt(program, t, bytes);
		for (let drone = 0; drone < drones; drone++) {
			const [r, g, b] = [linear[bytes[3 * drone]], linear[bytes[3 * drone + 1]], linear[bytes[3 * drone + 2]]];
			const luminance = luminanceOf(r, g, b);
			if (general.change(drone, t, luminance, LEAST_CHANGE, BRIGHT)) note(found, "general", general, drone, t);
			// Red flashes turn on the distance from white, signed by whether the state is a saturated red.
			if (red.change(drone, t, redness(r, g, b), RED_DISTANCE, Infinity)) note(found, "red", red, drone, t);
		}
	}
	return found
		.sort((a, b) => a.from - b.from || (a.kind < b.kind ? -1 : 1))
		.map(({ kind, from: start, to: end, most, drones: members }) => ({
			kind,
			from: start,
			to: end,
			most,
			drones: members.size,
			drone: Math.min(...members),
		}));
}

/** Distance in u′v′ from white for a saturated red, 0 for every other state: a red flash is a change of this. */
function redness(r: number, g: number, b: number): number {
	const sum = r + g + b;
	if (sum <= 0 || r / sum < RED_SHARE) return 0;
	// IEC 61966-2-1 primaries to CIE XYZ.
	const x = 0.4124 * r + 0.3576 * g + 0.1805 * b;
	const y = 0.2126 * r + 0.7152 * g + 0.0722 * b;
	const z = 0.0193 * r + 0.1192 * g + 0.9505 * b;
	const weight = x + 15 * y + 3 * z;
	return Math.hypot((4 * x) / weight - WHITE_U, (9 * y) / weight - WHITE_V);
}

/** Turning points of one quantity for every drone. */
interface Watch {
	/** Whether the drone has just made an opposing change. */
	change(drone: number, t: number, value: number, least: number, bright: number): boolean;
	/** Flashes (pairs of changes) of the drone in the second that ends at t, and when the first of them began. */
	recent(drone: number, t: number): { flashes: number; began: number };
}

function createWatch(drones: number): Watch {
	// Last extreme, the direction away from it (0: not known yet), when it was left, and the times of changes.
	const extreme = new Float64Array(drones).fill(Number.NaN);
	const direction = new Int8Array(drones);
	const left = new Float64Array(drones);
	const times = new Float64Array(drones * CHANGES).fill(-Infinity);
	const begins = new Float64Array(drones * CHANGES).fill(-Infinity);
	const made = new Int32Array(drones);
	const change = (drone: number, t: number, value: number, least: number, bright: number): boolean => {
		const last = extreme[drone];
		if (Number.isNaN(last)) {
			extreme[drone] = value;
			left[drone] = t;
			return false;
		}
		const way = Math.sign(value - last);
		if (way === direction[drone] || way === 0) {
			// Further the same way: the extreme moves along, and the opposing change can only begin here.
			extreme[drone] = value;
			left[drone] = t;
			return false;
		}
		if (Math.abs(value - last) < least - 1e-9 || Math.min(value, last) >= bright) return false;
		const at = drone * CHANGES + (made[drone] % CHANGES);
		times[at] = t;
		begins[at] = left[drone];
		made[drone]++;
		direction[drone] = way;
		extreme[drone] = value;
		left[drone] = t;
		return true;
	};
	const recent = (drone: number, t: number): { flashes: number; began: number } => {
		let count = 0;
		let began = t;
		for (let k = 0; k < CHANGES; k++) {
			const at = drone * CHANGES + k;
			if (times[at] <= t - 1 - 1e-9 || times[at] === -Infinity) continue;
			count++;
			began = Math.min(began, begins[at]);
		}
		return { flashes: count / 2, began };
	};
	return { change, recent };
}

/** Joins what follows within a second to the stretch that is running. */
function note(found: Stretch[], kind: "general" | "red", watch: Watch, drone: number, t: number): void {
	const { flashes, began } = watch.recent(drone, t);
	if (flashes <= ALLOWED) return;
	for (let i = found.length - 1; i >= 0; i--) {
		const stretch = found[i];
		if (stretch.kind !== kind || stretch.to < t - 1) continue;
		stretch.to = Math.max(stretch.to, t);
		stretch.from = Math.min(stretch.from, began);
		stretch.most = Math.max(stretch.most, flashes);
		stretch.drones.add(drone);
		return;
	}
	found.push({ kind, from: began, to: t, most: flashes, drones: new Set([drone]) });
}
