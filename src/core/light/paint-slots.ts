import type { Paint } from "../show/index.ts";
import { linearOf } from "./srgb.ts";

/** The slots that a paint is laid on. */
export interface Canvas {
	/** M, slots of the picture. */
	readonly count: number;
	/** 3·M metres in the show frame. */
	readonly positions: Float64Array;
	/** 3·M linear light: the formation's own colours, white where it has none. */
	readonly picture: Float32Array;
	/** Slots of the group, rising. */
	readonly members: Int32Array;
}

/**
 * A paint made ready for its slots: writes linear light of each member into `out` (3·M, slot after slot).
 * @param beats beats since the cue began
 */
export type Brush = (beats: number, out: Float32Array) => void;

/** Share of a swell's stretch over which it rises to the pulse, so that the pulse itself is its fullest. */
const RISE = 0.12;

/** Share of an interleave's stretch in which the colours change over: a step, yet no flash between two samples. */
const CHANGE = 0.15;

/** Share of a glint's stretch in which it lights up; the rest is its fall. */
const LIGHT_UP = 0.1;

export function createBrush(paint: Paint, canvas: Canvas): Brush {
	const { members } = canvas;
	switch (paint.kind) {
		case "flat": {
			const colour = linearOf(paint.colour);
			return (_beats, out) => {
				for (const slot of members) put(out, slot, colour[0], colour[1], colour[2]);
			};
		}
		case "gradient": {
			const along = placeAlong(canvas, paint.axis);
			const [from, to] = [linearOf(paint.from), linearOf(paint.to)];
			return blendBrush(members, from, to, (m) => along[m]);
		}
		case "band": {
			const along = placeAlong(canvas, paint.axis);
			const half = paint.width / 2;
			const [under, over] = [linearOf(paint.background), linearOf(paint.colour)];
			return blendBrush(members, under, over, (m, beats) => {
				// From wholly outside one end to wholly outside the other, so that it comes and goes without a jump.
				const turn = beats / paint.every;
				const middle = -half + (1 + paint.width) * (turn - Math.floor(turn));
				const away = Math.abs(along[m] - middle) / half;
				return away >= 1 ? 0 : 0.5 + 0.5 * Math.cos(Math.PI * away);
			});
		}
		case "interleave": {
			const colours = paint.colours.map(linearOf);
			const n = colours.length;
			return (beats, out) => {
				const turn = paint.every > 0 ? beats / paint.every : 0;
				const step = Math.floor(turn);
				// The change leads up to the beat, so that on the beat the new colours stand.
				const into = paint.every > 0 ? smooth((turn - step - (1 - CHANGE)) / CHANGE) : 0;
				for (let m = 0; m < members.length; m++) {
					const now = colours[(((m + step) % n) + n) % n];
					const next = colours[(((m + step + 1) % n) + n) % n];
					put(
						out,
						members[m],
						now[0] + (next[0] - now[0]) * into,
						now[1] + (next[1] - now[1]) * into,
						now[2] + (next[2] - now[2]) * into,
					);
				}
			};
		}
		case "glint": {
			const [under, over] = [linearOf(paint.background), linearOf(paint.colour)];
			return blendBrush(members, under, over, (m, beats) => {
				// Each slot has its own start within the stretch, so that they don't all light up at once.
				const turn = beats / paint.every + chanceOf(m, 0x51ed);
				const stretch = Math.floor(turn);
				if (chanceOf(m, stretch) >= paint.share) return 0;
				const phase = turn - stretch;
				return phase < LIGHT_UP ? smooth(phase / LIGHT_UP) : ((1 - phase) / (1 - LIGHT_UP)) ** 2;
			});
		}
		case "swell": {
			const colour = linearOf(paint.colour);
			return (beats, out) => {
				const level = swellAt(beats / paint.every, paint.floor);
				for (const slot of members) put(out, slot, colour[0] * level, colour[1] * level, colour[2] * level);
			};
		}
		case "picture": {
			const { picture } = canvas;
			return (_beats, out) => {
				for (const slot of members) put(out, slot, picture[3 * slot], picture[3 * slot + 1], picture[3 * slot + 2]);
			};
		}
	}
}

/** Full at whole numbers, falling quickly at first to `floor`, rising over the last stretch before the next. */
function swellAt(turn: number, floor: number): number {
	const phase = turn - Math.floor(turn);
	const fall = 1 - Math.min(1, phase / (1 - RISE));
	const shape = phase > 1 - RISE ? smooth((phase - (1 - RISE)) / RISE) : fall * fall;
	return floor + (1 - floor) * shape;
}

function blendBrush(
	members: Int32Array,
	from: readonly number[],
	to: readonly number[],
	shareOf: (member: number, beats: number) => number,
): Brush {
	const [dr, dg, db] = [to[0] - from[0], to[1] - from[1], to[2] - from[2]];
	return (beats, out) => {
		for (let m = 0; m < members.length; m++) {
			const part = shareOf(m, beats);
			put(out, members[m], from[0] + dr * part, from[1] + dg * part, from[2] + db * part);
		}
	};
}

function put(out: Float32Array, slot: number, red: number, green: number, blue: number): void {
	out[3 * slot] = red;
	out[3 * slot + 1] = green;
	out[3 * slot + 2] = blue;
}

/** 0 at one end of the group, 1 at the other, for each member; 0.5 where the group has no extent that way. */
function placeAlong(canvas: Canvas, axis: "right" | "away" | "up" | "out"): Float32Array {
	const { members, positions } = canvas;
	const values = new Float64Array(members.length);
	if (axis === "out") {
		const middle = [0, 1, 2].map((k) => {
			let [low, high] = [Infinity, -Infinity];
			for (const slot of members) {
				low = Math.min(low, positions[3 * slot + k]);
				high = Math.max(high, positions[3 * slot + k]);
			}
			return (low + high) / 2;
		});
		members.forEach((slot, m) => {
			const at = 3 * slot;
			values[m] = Math.hypot(positions[at] - middle[0], positions[at + 1] - middle[1], positions[at + 2] - middle[2]);
		});
	} else {
		const k = axis === "right" ? 0 : axis === "away" ? 1 : 2;
		members.forEach((slot, m) => {
			values[m] = positions[3 * slot + k];
		});
	}
	let [low, high] = [Infinity, -Infinity];
	for (const value of values) {
		low = Math.min(low, value);
		high = Math.max(high, value);
	}
	// Outward starts in the middle itself, whether or not a slot stands there.
	if (axis === "out") low = 0;
	return Float32Array.from(values, (value) => (high - low > 1e-9 ? (value - low) / (high - low) : 0.5));
}

/** Smoothstep, 0 below 0 and 1 above 1. */
export function smooth(share: number): number {
	const t = Math.min(1, Math.max(0, share));
	return t * t * (3 - 2 * t);
}

/** A number in [0, 1) that two whole numbers always give again (the mixing steps of splitmix32). */
function chanceOf(a: number, b: number): number {
	let z = (Math.imul(a + 1, 0x9e3779b9) + Math.imul(b + 1, 0x85ebca6b)) | 0;
	z = Math.imul(z ^ (z >>> 16), 0x21f0aaad);
	z = Math.imul(z ^ (z >>> 15), 0x735a2d97);
	return ((z ^ (z >>> 15)) >>> 0) / 4294967296;
}
