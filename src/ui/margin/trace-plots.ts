import type { LegTraces, Trace } from "../../core/flight/index.ts";
import type { Limits } from "../../core/show/index.ts";
import { GAP_TOLERANCE, LIMIT_TOLERANCE } from "../../core/units/index.ts";

/** One small chart, laid out in shares of its area: 0 is the left and the top. */
export interface Plot {
	readonly name: string;
	readonly unit: string;
	/** What it comes to: "at most 5.8 of 6". */
	readonly words: string;
	/** The drone that the line is of, from 1; null where it is of no single one. */
	readonly drone: number | null;
	/** Seconds of the show: where it comes to that. */
	readonly time: number;
	readonly broken: boolean;
	/** Path data on 100 × 100: from the least to the most of the fleet; null where there is no band. */
	readonly band: string | null;
	/** Likewise, of the drone nearest to the limit. */
	readonly line: string;
	/** Shares from the top. */
	readonly limits: readonly number[];
	/** Figures at the side. */
	readonly marks: readonly { readonly value: string; readonly at: number }[];
}

/** Room over the highest value and its limit. */
const ROOM = 1.12;
/** Gaps are drawn up to this many times the spacing: what is further apart is of no concern. */
const FAR = 4;

export function layPlots(traces: LegTraces, limits: Limits): Plot[] {
	const { horizontal, climb, acceleration, height, gap, times } = traces;
	return [
		layTrace(times, horizontal, { name: "Level speed", unit: "m/s", most: limits.horizontal }),
		layTrace(times, climb, { name: "Climb and descent", unit: "m/s", most: limits.climb, least: -limits.descent }),
		layTrace(times, acceleration, { name: "Acceleration", unit: "m/s²", most: limits.acceleration }),
		layHeight(times, height),
		layGap(times, gap, limits.spacing),
	];
}

interface Bounds {
	readonly name: string;
	readonly unit: string;
	readonly most: number;
	readonly least?: number;
}

function layTrace(times: Float64Array, trace: Trace, { name, unit, most, least }: Bounds): Plot {
	const high = ROOM * Math.max(most, ...trace.most);
	const low = least === undefined ? 0 : ROOM * Math.min(least, ...trace.least);
	const at = (value: number): number => (high - value) / (high - low);
	let top = 0;
	let bottom = 0;
	trace.most.forEach((value, k) => {
		if (value > trace.most[top]) top = k;
		if (trace.least[k] < trace.least[bottom]) bottom = k;
	});
	const up = trace.most[top];
	const down = trace.least[bottom];
	const over = up > most * (1 + LIMIT_TOLERANCE);
	const under = least !== undefined && down < least * (1 + LIMIT_TOLERANCE);
	const words =
		least === undefined
			? `at most ${figure(up)} of ${figure(most)}`
			: `up ${figure(up)} of ${figure(most)}, down ${figure(-down)} of ${figure(-least)}`;
	return {
		name,
		unit,
		words,
		drone: trace.drone + 1,
		time: times[least !== undefined && down / least > up / most ? bottom : top],
		broken: over || under,
		band: bandOf(trace, at),
		line: pathOf(trace.worst, at),
		limits: least === undefined ? [at(most)] : [at(most), at(least)],
		marks: [
			...(least === undefined ? [] : [{ value: figure(least), at: at(least) }]),
			{ value: "0", at: at(0) },
			{ value: figure(most), at: at(most) },
		],
	};
}

function layHeight(times: Float64Array, trace: Trace): Plot {
	const highest = Math.max(...trace.most);
	const lowest = Math.min(...trace.least);
	const room = Math.max(1, (highest - lowest) * 0.06);
	const [high, low] = [highest + room, lowest - room];
	const at = (value: number): number => (high - value) / (high - low);
	return {
		name: "Height",
		unit: "m",
		words: `from ${lowest.toFixed(1)} to ${highest.toFixed(1)}`,
		drone: trace.drone + 1,
		time: times[trace.most.indexOf(highest)],
		broken: false,
		band: bandOf(trace, at),
		line: pathOf(trace.worst, at),
		limits: [],
		marks: [lowest, highest].map((value) => ({ value: value.toFixed(0), at: at(value) })),
	};
}

function layGap(times: Float64Array, gap: Float64Array, spacing: number): Plot {
	const high = FAR * spacing;
	const at = (value: number): number => (high - Math.min(value, high)) / high;
	let nearest = 0;
	gap.forEach((value, k) => {
		if (value < gap[nearest]) nearest = k;
	});
	const least = gap[nearest];
	const known = Number.isFinite(least);
	return {
		name: "Smallest gap",
		unit: "m",
		words: known ? `at least ${least.toFixed(2)}, spacing ${figure(spacing)}` : "fewer than two drones in the air",
		drone: null,
		time: times[nearest],
		broken: known && least < spacing - GAP_TOLERANCE,
		band: null,
		line: pathOf(gap, at),
		limits: [at(spacing)],
		marks: [
			{ value: "0", at: 1 },
			{ value: figure(spacing), at: at(spacing) },
		],
	};
}

const figure = (value: number): string => String(Math.round(value * 100) / 100 + 0);

function pathOf(values: Float64Array, at: (value: number) => number): string {
	let path = "";
	values.forEach((value, k) => {
		path += `${k === 0 ? "M" : "L"}${pointOf(k, values.length, at(value))}`;
	});
	return path;
}

/** There along the most, back along the least. */
function bandOf({ least, most }: Trace, at: (value: number) => number): string {
	let path = pathOf(most, at);
	for (let k = least.length - 1; k >= 0; k--) path += `L${pointOf(k, least.length, at(least[k]))}`;
	return `${path}Z`;
}

function pointOf(k: number, count: number, at: number): string {
	return `${((100 * k) / (count - 1)).toFixed(2)} ${(100 * at).toFixed(2)}`;
}
