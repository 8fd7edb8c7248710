import type { ShowCheck, TransitionCheck } from "../../../src/core/flight/index.ts";
import { readShow } from "../../../src/core/show/index.ts";
import { sampleText } from "../show/sample-show.ts";

/** The sample show with names that would break a careless page or table. */
export const show = readShow(
	sampleText((file) => {
		file.title = 'Harbour <b>"night"</b> & fire';
		Object.assign(file.cues[2], { name: "=HYPERLINK(1)", note: 'watch the "crane",\nthen go' });
	}),
);

const leg: TransitionCheck = {
	id: "c3",
	from: "f1",
	to: "f2",
	departs: { beat: 20, time: 10.5 },
	arrives: { beat: 32, time: 16.5 },
	available: 6,
	needed: 4.25,
	slack: 1.75,
	slackBeats: 3.5,
	straightLineBound: 4.2,
	verdicts: ["flies"],
	peak: { horizontal: 4.2, climb: 1, descent: 0.5, acceleration: 2, jerk: 6 },
	gap: { distance: 1.7, time: 12, drones: [0, 3] },
	certificate: { assignment: "optimal", separation: "Bernstein" },
	remedies: [],
};

/** A check as the feasibility check would give it. */
export function checkOf(verdicts: TransitionCheck["verdicts"]): ShowCheck {
	const flies = verdicts.includes("flies");
	const remedies = [
		{
			kind: "earlier",
			change: "Depart 3 beats earlier.",
			cost: "The hold loses 1.5 s.",
			loss: 0.1,
			steps: [],
			ghost: null,
		},
	];
	return {
		flies,
		launch: { ...leg, id: "launch", from: "take-off grid", to: "f1" },
		landing: { ...leg, id: "landing", from: "f2", to: "take-off grid" },
		transitions: [{ ...leg, verdicts, remedies: flies ? [] : remedies }],
		formations: [
			{ id: "f1", gap: 5.2, verdicts: ["flies"] },
			{ id: "f2", gap: 3.1, verdicts: ["flies"] },
		],
		endurance: { airborne: 150, limit: 675 },
		notes: ["The wind is not known."],
	};
}
