import type { Show, Venue } from "../../show/index.ts";
import type { ShowFlight } from "../show-flight.ts";
import { createFallTable, type FallTable } from "./fall-table.ts";
import { type EnergyMark, energyMarks, impactEnergy } from "./impact.ts";
import { forEachInstant } from "./motion.ts";

/** One drone at one instant of the show: drones from 0, seconds. */
export interface FallFrom {
	readonly drone: number;
	readonly time: number;
}

/**
 * Where drones come down that lose power, over launch, show and landing, with the wind from any side. An estimate, not
 * a bound: see `fall.ts` for what it assumes.
 */
export interface FallZone {
	/** Corners of the outline on the ground, m, counter-clockwise seen from above: right, away. */
	readonly outline: readonly (readonly [number, number])[];
	/** Metres, level, from the place where power was lost to where the drone lands, position error included. */
	readonly farthest: FallFrom & { readonly distance: number; readonly height: number };
	/** Seconds of the longest fall. */
	readonly longest: number;
	/** Smallest distance to the audience line, m; negative beyond it. Null where the venue has none. */
	readonly audience: (FallFrom & { readonly distance: number }) | null;
	/** Smallest distance to the border, which is the flight volume with its buffer, m; negative outside. */
	readonly border: FallFrom & { readonly distance: number; readonly side: BorderSide };
	readonly impact: FallFrom & {
		/** Joules, m/s, metres of height. */
		readonly energy: number;
		readonly speed: number;
		readonly height: number;
		readonly marks: readonly EnergyMark[];
	};
	/** Seconds between the instants looked at. */
	readonly step: number;
}

export type BorderSide = "left" | "right" | "audience" | "away";

/** Seconds between two instants that are looked at. */
const STEP = 0.25;
/** Directions that the wind may come from, and in which the outline is found. */
const DIRECTIONS = 48;
/** Metres by which the table's farthest fall may be short of the one in a direction: both are read between nodes. */
const BETWEEN_NODES = 0.5;
/** Metres below which a drone stands on the ground. */
const ON_GROUND = 0.05;

/** @returns null where nothing leaves the ground */
export function findFallZone(show: Show, flight: ShowFlight): FallZone | null {
	const { fleet, venue } = show;
	const range = rangeOf(flight, venue.wind, fleet.terminalSpeed);
	if (range === null) return null;
	const search = new Search(show, createFallTable(range));
	forEachInstant(flight, STEP, (time, positions, velocities) => {
		for (let drone = 0; drone < flight.drones; drone++) search.look(time, drone, positions, velocities);
	});
	return search.result();
}

/** What the table must cover: the highest drone, the fastest climb and descent, the fastest through the air. */
function rangeOf(flight: ShowFlight, wind: number, terminalSpeed: number) {
	let highest = 0;
	let across = 0;
	let [least, most] = [0, 0];
	forEachInstant(flight, STEP, (_time, positions, velocities) => {
		for (let k = 0; k < positions.length; k += 3) {
			highest = Math.max(highest, positions[k + 2]);
			across = Math.max(across, Math.hypot(velocities[k], velocities[k + 1]));
			least = Math.min(least, velocities[k + 2]);
			most = Math.max(most, velocities[k + 2]);
		}
	});
	if (highest <= ON_GROUND) return null;
	// A span of no width would divide by zero where nothing moves.
	return {
		terminalSpeed,
		wind,
		highest,
		across: Math.max(across, 0.1),
		climb: { least, most: Math.max(most, least + 0.1) },
	};
}

/** Keeps the farthest of everything while it is shown one drone after the other. */
class Search {
	private readonly table: FallTable;
	private readonly wind: number;
	private readonly error: number;
	private readonly show: Show;
	/** x, y of each direction; how far the zone reaches in it. */
	private readonly towards: Float64Array;
	private readonly reach = new Float64Array(DIRECTIONS).fill(Number.NEGATIVE_INFINITY);
	private readonly fall = new Float64Array(4);
	private readonly worst = new Float64Array(3);
	private readonly audience: Audience | null;
	private readonly border: Border;
	private farthest = { drone: 0, time: 0, distance: 0, height: 0 };
	private longest = 0;
	private nearAudience = { drone: 0, time: 0, distance: Number.POSITIVE_INFINITY };
	private nearBorder = { drone: 0, time: 0, distance: Number.POSITIVE_INFINITY, side: "left" as BorderSide };
	private impact = { drone: 0, time: 0, speed: 0, height: 0 };

	constructor(show: Show, table: FallTable) {
		this.show = show;
		this.table = table;
		this.wind = show.venue.wind;
		this.error = show.fleet.positionError;
		this.audience = audienceOf(show.venue);
		this.border = borderOf(show.venue);
		this.towards = Float64Array.from({ length: 2 * DIRECTIONS }, (_, k) => {
			const angle = (2 * Math.PI * Math.floor(k / 2)) / DIRECTIONS;
			return k % 2 === 0 ? Math.cos(angle) : Math.sin(angle);
		});
	}

	look(time: number, drone: number, positions: Float64Array, velocities: Float64Array): void {
		const [x, y, height] = [positions[3 * drone], positions[3 * drone + 1], positions[3 * drone + 2]];
		if (height <= ON_GROUND) return;
		const [ux, uy, climb] = [velocities[3 * drone], velocities[3 * drone + 1], velocities[3 * drone + 2]];
		const { fall, worst, wind, towards, error } = this;
		this.table.worst(height, climb, Math.hypot(ux, uy), worst);
		const [seconds, farthest, speed] = worst;
		this.longest = Math.max(this.longest, seconds);
		const distance = farthest + error;
		if (distance > this.farthest.distance) this.farthest = { drone, time, distance, height };
		if (speed > this.impact.speed) this.impact = { drone, time, speed, height };
		if (!this.mayMatter(x, y, farthest + BETWEEN_NODES)) return;
		for (let k = 0; k < (wind > 0 ? DIRECTIONS : 1); k++) {
			const [wx, wy] = [wind * towards[2 * k], wind * towards[2 * k + 1]];
			const across = Math.hypot(ux - wx, uy - wy);
			this.table.lookUp(height, climb, across, fall);
			const [ax, ay] = across > 0 ? [(ux - wx) / across, (uy - wy) / across] : [0, 0];
			this.land(time, drone, x + wx * fall[0] + ax * fall[1], y + wy * fall[0] + ay * fall[1]);
		}
	}

	/** Whether a drone that may land as far off as `most` can widen the outline or come nearer to people or border. */
	private mayMatter(x: number, y: number, most: number): boolean {
		const { reach, towards, error } = this;
		for (let k = 0; k < DIRECTIONS; k++) {
			if (x * towards[2 * k] + y * towards[2 * k + 1] + most > reach[k]) return true;
		}
		if (this.border(x, y).distance - most - error < this.nearBorder.distance) return true;
		if (this.audience === null) return false;
		const { before, outside } = this.audience(x, y);
		const near = this.nearAudience.distance + error;
		return before - most < near && (near < 0 || outside - most < near);
	}

	private land(time: number, drone: number, x: number, y: number): void {
		const { reach, towards, error } = this;
		for (let k = 0; k < DIRECTIONS; k++) {
			const far = x * towards[2 * k] + y * towards[2 * k + 1];
			if (far > reach[k]) reach[k] = far;
		}
		const border = this.border(x, y);
		if (border.distance - error < this.nearBorder.distance) {
			this.nearBorder = { drone, time, distance: border.distance - error, side: border.side };
		}
		if (this.audience === null) return;
		const { before, outside } = this.audience(x, y);
		const distance = (outside > 0 ? outside : before) - error;
		if (distance < this.nearAudience.distance) this.nearAudience = { drone, time, distance };
	}

	result(): FallZone {
		const { mass, terminalSpeed } = this.show.fleet;
		return {
			outline: outlineOf(
				this.reach.map((far) => far + this.error),
				this.towards,
			),
			farthest: this.farthest,
			longest: this.longest,
			audience: this.audience === null ? null : this.nearAudience,
			border: this.nearBorder,
			impact: {
				...this.impact,
				energy: impactEnergy(mass, this.impact.speed),
				marks: energyMarks(mass, terminalSpeed),
			},
			step: STEP,
		};
	}
}

/** Corners where neighbouring lines of support meet. */
function outlineOf(reach: Float64Array, towards: Float64Array): [number, number][] {
	const corners: [number, number][] = [];
	for (let k = 0; k < DIRECTIONS; k++) {
		const next = (k + 1) % DIRECTIONS;
		const [ax, ay, bx, by] = [towards[2 * k], towards[2 * k + 1], towards[2 * next], towards[2 * next + 1]];
		const turn = ax * by - ay * bx;
		const x = (reach[k] * by - reach[next] * ay) / turn;
		const y = (ax * reach[next] - bx * reach[k]) / turn;
		const last = corners.at(-1);
		if (last === undefined || Math.hypot(x - last[0], y - last[1]) > 1e-3) corners.push([round(x), round(y)]);
	}
	return corners;
}

/** Centimetres are more than an estimate can tell. */
function round(metres: number): number {
	return Math.round(metres * 100) / 100 + 0;
}

/**
 * `before`: metres in front of the line through the audience line, negative behind it. `outside`: metres to the ground
 * behind the audience line, where people stand; 0 on it.
 */
type Audience = (x: number, y: number) => { readonly before: number; readonly outside: number };

function audienceOf(venue: Venue): Audience | null {
	if (venue.audience === null) return null;
	const { from, to } = venue.audience;
	const length = Math.hypot(to[0] - from[0], to[1] - from[1]);
	const along = length > 0 ? [(to[0] - from[0]) / length, (to[1] - from[1]) / length] : [1, 0];
	const { min, max } = venue.volume;
	const middle = [(min[0] + max[0]) / 2 - from[0], (min[1] + max[1]) / 2 - from[1]];
	// The fleet's side is the one on which the flight volume lies.
	const side = Math.sign(along[0] * middle[1] - along[1] * middle[0]) || 1;
	return (x, y) => {
		const [px, py] = [x - from[0], y - from[1]];
		const before = side * (along[0] * py - along[1] * px);
		const foot = along[0] * px + along[1] * py;
		const beside = Math.max(0, -foot, foot - length);
		return { before, outside: Math.hypot(beside, Math.max(0, before)) };
	};
}

type Border = (x: number, y: number) => { readonly distance: number; readonly side: BorderSide };

function borderOf({ volume: { min, max }, buffer }: Venue): Border {
	return (x, y) => {
		const sides: readonly (readonly [BorderSide, number])[] = [
			["left", x - min[0] + buffer],
			["right", max[0] + buffer - x],
			["audience", y - min[1] + buffer],
			["away", max[1] + buffer - y],
		];
		let [side, distance] = sides[0];
		for (const [other, room] of sides) if (room < distance) [side, distance] = [other, room];
		return { side, distance };
	};
}
