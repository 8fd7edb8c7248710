import { smallestGap } from "../maths/index.ts";
import type { Limits, Place, Shape, Venue } from "../show/index.ts";
import { GAP_TOLERANCE, StarstaveError } from "../units/index.ts";
import { moveIntoVenue, shareThatFits } from "./fit-venue.ts";
import { boxOf } from "./reserve.ts";
import { sizeToSpacing, stretchShape } from "./size.ts";
import { slotsOf } from "./slots-of.ts";

/** Gap over spacing of a picture that has just come in: room for flights to pass. */
const COMFORT = 1.2;
/** Lowest slot of a new picture, m: high enough to be seen over heads and trees; and how far away it stands. */
const LOWEST = 20;
const AWAY = 30;

/** A new picture where the fleet can stand, as far as the venue allows. */
export interface SettledShape {
	readonly shape: Shape;
	readonly place: Place;
	/** What was done, and what is left to do, as sentences. */
	readonly note: string;
}

/**
 * Sizes a new picture so that its slots keep the spacing with some room, and places it inside the venue. Points keep
 * their metres: they were measured by whoever made them, so they are only brought in, and said to be too close.
 */
export function settleShape(
	shape: Shape,
	limits: Limits,
	venue: Pick<Venue, "volume" | "blocked">,
	name: string,
): SettledShape {
	let sized = sizedOrAsItIs(shape, limits);
	const placeAt = (position: readonly number[]): Place => ({
		position: [position[0], position[1], position[2]],
		turn: 0,
		tilt: 0,
		scale: 1,
	});
	const spread = (one: Shape, position: readonly number[]): Float64Array =>
		slotsOf({ id: "", name, shape: one, place: placeAt(position) }, limits.downwash).positions;
	let local = spread(sized, [0, 0, 0]);
	const share = shareThatFits(local, venue);
	if (share < 1 && shape.kind !== "points") {
		sized = stretchShape(sized, Math.floor(share * 1000) / 1000);
		local = spread(sized, [0, 0, 0]);
	}
	const box = boxOf(local);
	const start =
		shape.kind === "points" ? [0, 0, 0] : [0, AWAY, Math.ceil(Math.max(LOWEST, venue.volume.min[2]) - box.min[2])];
	const move = moveIntoVenue(spread(sized, start), venue) ?? [0, 0, 0];
	const position = start.map((value, axis) => Math.round((value + move[axis]) * 1000) / 1000);
	const gap = smallestGap(local, limits.downwash).distance;
	return { shape: sized, place: placeAt(position), note: sayHow(name, sized, box, gap, limits.spacing, share) };
}

/** Two slots on one place are parted by no size: the picture comes in all the same, to be mended. */
function sizedOrAsItIs(shape: Shape, limits: Limits): Shape {
	if (shape.kind === "points") return shape;
	try {
		return sizeToSpacing(shape, limits, COMFORT);
	} catch (error) {
		if (error instanceof StarstaveError) return shape;
		throw error;
	}
}

function sayHow(
	name: string,
	shape: Shape,
	box: ReturnType<typeof boxOf>,
	gap: number,
	spacing: number,
	share: number,
): string {
	const [wide, deep, high] = [0, 1, 2].map((axis) => (box.max[axis] - box.min[axis]).toFixed(1));
	const size = `${name} is ${wide} m wide, ${deep} m deep and ${high} m high`;
	if (!Number.isFinite(gap)) return `${size}.`;
	const apart = `its slots stand ${gap.toFixed(2)} m apart or more, and spacing is ${spacing} m`;
	if (gap >= spacing - GAP_TOLERANCE) {
		return shape.kind === "points" ? `${size}: ${apart}.` : `${size}, sized so that ${apart}.`;
	}
	const why =
		shape.kind === "points" ? "as the file has it, but" : share < 1 ? "as the flight volume allows, but" : "but";
	return `${size}, ${why} its closest slots stand ${gap.toFixed(2)} m apart, and spacing is ${spacing} m: Formations says what would mend it.`;
}
