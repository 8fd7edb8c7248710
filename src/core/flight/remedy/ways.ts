import { smallestGap } from "../../maths/index.ts";
import type { FleetSlots, Place } from "../../show/index.ts";
import { SPACING_HAIR } from "../../units/index.ts";
import { changePlace, type End, middleOf } from "./ends.ts";
import type { TrialBase } from "./trial.ts";

export type Reshaping = "shrink" | "spread" | "nearer" | "turn";

/** Steps between nothing and the most, in which a size or a way is looked for. */
const STEPS = 16;
const MOST_TURN = 90;
/** Likewise of a picture that is read: turned further, nobody can. */
const MOST_TURN_READ = 30;
/** Share of the way to the other picture: all of it, and the one would stand where the other stood. */
const NEAREST = 0.75;
const LARGEST = 1.6;
const SMALLEST = 0.5;

/** One way of changing an end, by how much: 0 nothing, 1 the most. */
export interface Way {
	readonly kind: Reshaping;
	readonly end: End;
	readonly other: End;
	/** Place at `amount`, and what it is in words; the amounts are rounded to what people would choose. */
	at(amount: number): { readonly place: Place; readonly change: string; readonly loss: number; readonly cost: string };
	readonly steps: number;
}

/** How a kind of change is made at one end; null where it changes nothing there. */
export function wayOf(base: TrialBase, kind: Reshaping, end: End, other: End): Way | null {
	const own = base.slots.get(end.formation);
	const there = base.slots.get(other.formation);
	if (own === undefined || there === undefined || own.count === 0) return null;
	const { place } = base.show.formations.byId[end.formation];
	const middle = middleOf(own);
	if (kind === "shrink" || kind === "spread") return sizeWay(base, kind, end, other, own, place, middle);
	if (kind === "nearer") {
		const towards = middleOf(there);
		const way = [0, 1, 2].map((axis) => towards[axis] - middle[axis]);
		const distance = Math.hypot(way[0], way[1], way[2]);
		if (distance < 1) return null;
		const size = Math.max(1, extentOf(own));
		return {
			kind,
			end,
			other,
			steps: STEPS,
			at: (amount) => {
				const metres = Math.max(0.5, Math.round(2 * amount * NEAREST * distance) / 2);
				const move = way.map((value) => (value * metres) / distance);
				return {
					place: changePlace(place, middle, { move }),
					change: `Bring ${end.name} ${metres} m nearer to ${other.name}.`,
					cost: `The picture stands ${sayMove(move)}.`,
					loss: 0.15 + Math.min(0.5, (0.4 * metres) / size),
				};
			},
		};
	}
	const { shape } = base.show.formations.byId[end.formation];
	const most = shape.kind === "text" || shape.kind === "drawing" ? MOST_TURN_READ : MOST_TURN;
	const step = own.count > 500 ? 15 : 5;
	return {
		kind,
		end,
		other,
		// To either side in turn, so that the smallest turn is found first.
		steps: (2 * most) / step,
		at: (amount) => {
			const k = Math.round((amount * 2 * most) / step);
			const size = Math.ceil(k / 2) * step;
			const turn = k % 2 === 1 ? size : -size;
			return {
				place: changePlace(place, middle, { turn }),
				change: `Turn ${end.name} by ${size}° about the upright, ${turn > 0 ? "anticlockwise" : "clockwise"} from above.`,
				cost: `The audience sees it from another side: ${size}° off how it was drawn.`,
				loss: 0.15 + size / 100,
			};
		},
	};
}

function sizeWay(
	base: TrialBase,
	kind: "shrink" | "spread",
	end: End,
	other: End,
	own: FleetSlots,
	place: Place,
	middle: readonly number[],
): Way | null {
	const { limits } = base.show.fleet;
	const gap = smallestGap(own.positions, limits.downwash).distance;
	// The smallest that keeps spacing; a picture of one slot has no size.
	const least = Number.isFinite(gap) && gap > 0 ? Math.max(SMALLEST, (limits.spacing + SPACING_HAIR) / gap) : 1;
	const [first, last] = kind === "shrink" ? [99, Math.ceil(100 * least)] : [102, 100 * LARGEST];
	if (kind === "shrink" && last > first) return null;
	const span = extentOf(own);
	return {
		kind,
		end,
		other,
		steps: Math.min(STEPS, Math.abs(last - first) + 1),
		at: (amount) => {
			const percent = Math.round(first + (last - first) * amount);
			const scale = percent / 100;
			return {
				place: changePlace(place, middle, { scale }),
				change: `${kind === "shrink" ? "Shrink" : "Spread"} ${end.name} to ${percent} %.`,
				cost: `The picture is ${(span * scale).toFixed(1)} m instead of ${span.toFixed(1)} m across.`,
				loss: 0.08 + Math.abs(1 - scale) * (kind === "shrink" ? 1 : 0.8),
			};
		},
	};
}

/** Largest side of the box about the lit slots, m. */
export function extentOf({ positions }: Pick<FleetSlots, "positions">): number {
	let widest = 0;
	for (let axis = 0; axis < 3; axis++) {
		let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
		for (let k = axis; k < positions.length; k += 3) {
			low = Math.min(low, positions[k]);
			high = Math.max(high, positions[k]);
		}
		widest = Math.max(widest, high - low);
	}
	return widest;
}

/** "3 m further right and 2 m lower" */
export function sayMove(move: readonly number[]): string {
	const words = [
		["further right", "further left"],
		["further back", "nearer to the audience"],
		["higher", "lower"],
	];
	const parts = move.flatMap((value, axis) =>
		Math.abs(value) < 0.05 ? [] : [`${Math.abs(value).toFixed(1)} m ${words[axis][value > 0 ? 0 : 1]}`],
	);
	return parts.length > 1 ? `${parts.slice(0, -1).join(", ")} and ${parts.at(-1)}` : (parts[0] ?? "where it stood");
}
