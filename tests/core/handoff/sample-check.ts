import type { Care, ShowCheck, TransitionCheck } from "../../../src/core/flight/index.ts";
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
	breach: null,
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

/** What the flight asks beyond its proof, as it would be worked out. */
export function careOf(): Care {
	const from = { drone: 4, time: 12 };
	const marks = [
		{ energy: 14.914, source: "14 CFR 107.120", height: 3.53 },
		{ energy: 33.895, source: "14 CFR 107.130", height: null },
	];
	return {
		fallZone: {
			outline: [
				[20, 0],
				[0, 30],
				[-20, 0],
			],
			farthest: { ...from, distance: 48.2, height: 40 },
			longest: 5.5,
			audience: { ...from, distance: -3.2 },
			border: { ...from, distance: 6.5, side: "left" },
			impact: { ...from, energy: 60, speed: 15.5, height: 40, marks },
			step: 0.25,
		},
		wakeHolds: [
			{ where: "show", formation: "f2", cue: "c3", from: 16.5, to: 26, drones: 4, worst: { drone: 2, above: 2 } },
		],
		wakeRemedies: [
			{
				kind: "tilt",
				formation: "f2",
				change: "Tilt Heart by 10°, away from the audience at its head.",
				cost: "None of the 4 drones stands under another any more.",
				before: 4,
				after: 0,
				gap: 2.9,
				edit: {},
			},
		],
		asFlown: {
			legs: [
				{
					id: "c3",
					lag: { distance: 1.2, time: 13, drone: 1 },
					atArrival: 0.1,
					settled: 0,
					gap: { distance: 1.4, time: 13.2, drones: [0, 3] },
					gapInGust: 1.32,
				},
			],
			lag: 0.32,
			push: 0.08,
			delayMargin: 0.12,
			steady: true,
			near: 0.25,
			rate: 10,
		},
		airtime: {
			seconds: [150, 148],
			longest: { drone: 0, seconds: 150 },
			shortest: { drone: 1, seconds: 148 },
			limit: 675,
		},
	};
}
