import { applyRemedy, type FlownShow, flyShow, type Remedy } from "../../../../src/core/flight/index.ts";
import { fleetSlotsOf, takeoffSlots } from "../../../../src/core/formation/index.ts";
import { applyEdit, readShow, type Show } from "../../../../src/core/show/index.ts";

/** A show on a grid of 120 beats a minute, with the formations and transitions given; the first one is the opening. */
export function smallShow(
	count: number,
	formations: readonly object[],
	cues: readonly object[],
	venue: object = {},
	more: object = {},
): Show {
	return readShow(
		JSON.stringify({
			format: "starstave-show",
			version: 1,
			fleet: { count },
			grid: {
				beats: Array.from({ length: 401 }, (_, i) => i * 0.5),
				bars: Array.from({ length: 100 }, (_, i) => ({ beat: 4 * i, beatsPerBar: 4 })),
			},
			opening: (formations[0] as { id: string }).id,
			formations,
			cues: cues.map((cue, i) => ({ id: `c${i + 1}`, number: String(i + 1), kind: "transition", ...cue })),
			venue,
			...more,
		}),
	);
}

/** Planned, strung together and proven from scratch, knowing nothing of earlier plans. */
export const fly = (show: Show): FlownShow => flyShow(show, fleetSlotsOf(show), takeoffSlots(show));

export const applied = (show: Show, remedy: Pick<Remedy, "steps">): Show =>
	applyEdit(show, (draft) => applyRemedy(draft, remedy)).show;
