/**
 * Straight paths that come too near are bent apart: approaches under the spacing are projected, one after the other, onto
 * keeping it, weighted by how much time each drone has to spare, while drones that would hold up the fleet yield. The time
 * that the fleet is given grows until all is parted; then it is tightened as long as that succeeds. What comes out is only
 * a proposal: the proof has the last word.
 */
import { lawForPaths } from "../law/fleet-law.ts";
import { dilate, lawDuration } from "../law/time-law.ts";
import type { LegProblem } from "../leg-problem.ts";
import { type Paths, straightPaths } from "../paths/polynomial-paths.ts";
import type { TimeLaw } from "../plan.ts";
import { smallestSeparation } from "../proof/separation.ts";
import { type Approaches, createLookout } from "./approaches.ts";
import { type Bends, bentPaths, straightBends } from "./bends.ts";
import { createPace, type Pace } from "./pace.ts";
import { createRoom } from "./room.ts";
import { separate } from "./separate.ts";

export interface PartingOptions {
	/** Distance to come to, and the least that will do, m in the measure of spacing. */
	readonly gap: number;
	readonly least: number;
	/** Seconds: no plan can be shorter; one as short as `enough` is not bettered; one of `latest` not worth going on for. */
	readonly bound: number;
	readonly enough: number;
	readonly latest: number;
	/** Looks at the fleet in all. */
	readonly looks: number;
}

export interface Parted {
	readonly paths: Paths;
	readonly law: TimeLaw;
}

/** Projections of every approach between two looks. */
const SWEEPS = 16;
/** Approaches are searched for anew every so many looks; in between the known ones are followed. */
const SEARCH = 4;
/** Approaches under this many gaps are kept in mind between two looks. */
const MIND = 1.12;
/** Mobility of a drone that has no time to spare. */
const STIFF = 0.02;
/** Looks in which what is missing must fall by this share, or the fleet is given more time. */
const PATIENCE = 8;
const PROGRESS = 0.3;
const MORE_TIME = 1.03;
/** How the time is tightened once all is parted, and looks that this may take each time. */
const TIGHTEN = 0.985;
const POLISH = 16;
/** A tightening that gains less than this is the last. */
const WORTH = 0.996;

/** @param target end slot of each row; @returns the quickest paths found that keep the gap, or null */
export function partPairs(problem: LegProblem, target: Int32Array, options: PartingOptions): Parted | null {
	const { from, to, limits, timeLaw } = problem;
	const { gap } = options;
	const count = target.length;
	const bends = straightBends(from, to, target, limits.downwash);
	const pathsNow = (): Paths => bentPaths(from, to, target, bends, limits.downwash);
	const lookout = createLookout(bends, gap);
	const room = createRoom(bends, problem.volume, problem.blocked, limits.downwash);
	const mobility = new Float64Array(count);
	let law = lawForPaths(pathsNow(), count, limits, timeLaw);
	if (lawDuration(law) === 0) return { paths: straightPaths(from, to, target), law };
	let pace = createPace(law, limits, limits.downwash);
	let best: Parted | null = null;
	let duration = Math.max(options.bound * 1.01, 0.98 * lawDuration(law));
	let near = lookout.look(MIND * gap);
	let since = 0;
	let lacked = Infinity;
	for (let round = 0; round < options.looks; round++) {
		const outside = room.keep(bends);
		if (round % SEARCH === 0 || (outside === 0 && smallest(near) >= options.least)) near = lookout.look(MIND * gap);
		since++;
		if (outside === 0 && smallest(near) >= options.least) {
			const paths = round === 0 ? straightPaths(from, to, target) : pathsNow();
			if (smallestSeparation(paths.coefficients, paths.degree, count, limits.downwash).distance < options.least) {
				// Between two instants of the lookout something slipped past it.
				if (!lookout.sharpen()) break;
				continue;
			}
			const kept = dilate(law, hasteOf(pace, bends, lawDuration(law)));
			const fitted = lawForPaths(paths, count, limits, timeLaw);
			law = lawDuration(fitted) < lawDuration(kept) ? fitted : kept;
			const before: number = best === null ? Infinity : lawDuration(best.law);
			if (lawDuration(law) < before) best = { paths, law };
			if (best === null || lawDuration(best.law) <= options.enough || lawDuration(law) > WORTH * before) break;
			pace = createPace(law, limits, limits.downwash);
			duration = Math.max(options.bound, lawDuration(best.law) * TIGHTEN);
			since = 0;
		} else if (best !== null) {
			if (since > POLISH) break;
		} else if (since % PATIENCE === 0) {
			const lacking = missing(near, gap) + outside;
			if (lacking > (1 - PROGRESS) * lacked) {
				duration *= MORE_TIME;
				if (duration > options.latest) break;
			}
			lacked = lacking;
		}
		for (let i = 0; i < count; i++) {
			mobility[i] = Math.max(STIFF, Math.min(1, 1 - pace.yieldTo(bends, i, duration)));
		}
		for (let sweep = 0; sweep < SWEEPS; sweep++) if (separate(bends, near, mobility, gap) === 0) break;
		lookout.follow();
	}
	return best;
}

function smallest({ count, distance }: Approaches): number {
	let least = Infinity;
	for (let k = 0; k < count; k++) if (distance[k] < least) least = distance[k];
	return least;
}

/** Metres that all approaches together lack. */
function missing({ count, distance }: Approaches, gap: number): number {
	let sum = 0;
	for (let k = 0; k < count; k++) if (distance[k] < gap) sum += gap - distance[k];
	return sum;
}

function hasteOf(pace: Pace, bends: Bends, duration: number): number {
	let most = 0;
	for (let i = 0; 3 * i < bends.start.length; i++) most = Math.max(most, pace.haste(bends, i, duration));
	return most;
}
