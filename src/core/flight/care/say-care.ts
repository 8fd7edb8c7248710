import { find, type Show } from "../../show/index.ts";
import type { Airtime } from "./airtime.ts";
import type { AsFlown, LegAsFlown } from "./as-flown.ts";
import type { Care } from "./care.ts";
import type { BorderSide, FallZone } from "./fall-zone.ts";
import type { WakeHold } from "./wake.ts";

/** One matter of care in plain words, for screen, command line and report alike. */
export interface CareTopic {
	readonly id: "fall-zone" | "impact" | "wake" | "as-flown" | "airtime";
	readonly heading: string;
	/** What was found, most important first. */
	readonly sentences: readonly string[];
	/** True where someone has to do something about it before the show is flown. */
	readonly attention: boolean;
	/** What was taken for granted, as sentences. */
	readonly assumptions: readonly string[];
}

/** What was found, with what it rests on; nothing in it is a permission. Drones count from 1. */
export function sayCare(show: Show, care: Care): CareTopic[] {
	const { fallZone, airtime } = care;
	const topics = [
		...(fallZone === null ? [] : [sayFallZone(show, fallZone), sayImpact(show, fallZone)]),
		sayWake(show, care),
		sayAsFlown(show, care.asFlown),
		...(airtime === null ? [] : [sayAirtime(airtime)]),
	];
	return topics.map((topic) => ({
		...topic,
		sentences: topic.sentences.map(keepUnits),
		assumptions: topic.assumptions.map(keepUnits),
	}));
}

/** No line may end between a number and its unit. */
function keepUnits(sentence: string): string {
	return sentence.replace(/(\d) (?=(?:m|s|ms|m\/s|J|kg|Hz|%)(?![\p{L}\d]))/gu, "$1\u00a0");
}

const SIDES: Readonly<Record<BorderSide, string>> = {
	left: "on the audience's left",
	right: "on the audience's right",
	audience: "on the audience's side",
	away: "on the side away from the audience",
};

const metres = (value: number): string => `${value.toFixed(value < 1 ? 2 : value < 10 ? 1 : 0)} m`;
const clock = (seconds: number): string => {
	const whole = Math.round(Math.abs(seconds));
	return `${seconds < 0 ? "−" : ""}${Math.floor(whole / 60)}:${String(whole % 60).padStart(2, "0")}`;
};
const count = (number: number, one: string, many: string): string => (number === 1 ? `1 ${one}` : `${number} ${many}`);

function sayFallZone(show: Show, zone: FallZone): CareTopic {
	const { venue, fleet } = show;
	const { farthest, audience, border } = zone;
	const sentences = [
		`A drone that loses power comes down as far as ${metres(farthest.distance)} from where it was, within ${zone.longest.toFixed(1)} s; farthest would be drone ${farthest.drone + 1} at ${clock(farthest.time)}, from a height of ${metres(farthest.height)}.`,
	];
	let attention = false;
	if (audience === null) {
		attention = true;
		sentences.push("The venue has no audience line, so nothing can be said of the distance to people: draw one.");
	} else if (audience.distance <= 0) {
		attention = true;
		sentences.push(
			`The fall zone reaches ${metres(-audience.distance)} past the audience line (drone ${audience.drone + 1} at ${clock(audience.time)}): move the show away from people, or fly it lower, slower or in less wind.`,
		);
	} else if (audience.distance < venue.buffer) {
		attention = true;
		sentences.push(
			`It ends only ${metres(audience.distance)} short of the audience line (drone ${audience.drone + 1} at ${clock(audience.time)}), less than the buffer of ${venue.buffer} m.`,
		);
	} else {
		sentences.push(
			`It ends ${metres(audience.distance)} short of the audience line (nearest: drone ${audience.drone + 1} at ${clock(audience.time)}).`,
		);
	}
	if (border.distance < 0) {
		attention = true;
		sentences.push(
			`It reaches ${metres(-border.distance)} out of the flight volume and its buffer of ${venue.buffer} m, ${SIDES[border.side]} (drone ${border.drone + 1} at ${clock(border.time)}): that ground has to be clear too.`,
		);
	} else {
		sentences.push(
			`It stays ${metres(border.distance)} inside the flight volume and its buffer of ${venue.buffer} m; nearest ${SIDES[border.side]}.`,
		);
	}
	if (venue.wind === 0) {
		attention = true;
		sentences.push("The venue's wind is 0 m/s, which no night is: give the strongest wind that you would fly in.");
	}
	return {
		id: "fall-zone",
		heading: "Fall zone",
		sentences,
		attention,
		assumptions: [
			`An estimate, not a bound. Each drone is let fall from where it is and as fast as it flies, every ${zone.step} s from launch to landing.`,
			`Wind of ${venue.wind} m/s at every height, from whichever side is worst; quadratic drag with a terminal speed of ${fleet.terminalSpeed} m/s, the same from every side; a position error of ${fleet.positionError} m added.`,
			"Tumbling, gliding, gusts, wind that grows with height, and a drone that flies off under power are not in it.",
		],
	};
}

function sayImpact(show: Show, { impact }: FallZone): CareTopic {
	const [first, second] = impact.marks.map(({ energy, source, height }) => {
		const from = height === null ? "never passed by this drone" : `passed after a fall of ${metres(height)}`;
		return `${energy.toFixed(1)} J (${source}) is ${from}`;
	});
	return {
		id: "impact",
		heading: "Impact energy",
		sentences: [
			`A drone of ${show.fleet.mass} kg that falls from ${metres(impact.height)} comes down at ${impact.speed.toFixed(1)} m/s with ${impact.energy.toFixed(0)} J.`,
			`For scale: ${first}, ${second}. These are marks on a scale, not a permission.`,
		],
		attention: false,
		assumptions: [
			"Energy is ½ m v² with the whole mass and the speed over the ground, as the fall zone has it. The marks are the 11 and 25 foot-pounds that the rules named measure injury by.",
		],
	};
}

function nameOf(show: Show, id: string): string {
	return find(show.formations, id)?.name || id;
}

function placeOf(show: Show, { where, formation, cue }: WakeHold): string {
	if (where === "launch") return "Over the take-off grid, while the waves of launch gather,";
	if (where === "landing") return "Over the take-off grid, while the waves of landing wait,";
	const after = cue === null ? "in the opening" : `after cue ${find(show.cues, cue)?.number ?? cue}`;
	return `In ${nameOf(show, formation)}, ${after},`;
}

function sayWake(show: Show, care: Care): CareTopic {
	const { radius, reach } = show.fleet.wake;
	const holds = [...care.wakeHolds].sort((a, b) => b.drones * (b.to - b.from) - a.drones * (a.to - a.from));
	const sentences = holds.map((hold) => {
		const stack = hold.worst.above > 1 ? `, drone ${hold.worst.drone + 1} under ${hold.worst.above} of them` : "";
		const upTo = hold.where === "show" ? "" : "up to ";
		return `${placeOf(show, hold)} ${count(hold.drones, "drone stands", "drones stand")} in the wake of others for ${upTo}${(hold.to - hold.from).toFixed(1)} s${stack}.`;
	});
	return {
		id: "wake",
		heading: "Standing in the wake of others",
		sentences: sentences.length > 0 ? sentences : ["In no hold does a drone stand in the wake of another."],
		attention: holds.length > 0,
		assumptions: [
			`A wake is the air that a drone throws down, taken as ${radius} m about it and ${reach} m below it. A drone that stays in it works harder, shakes and drifts; the spacing of the proof knows nothing of how long.`,
		],
	};
}

function cueNumber(show: Show, { id }: LegAsFlown): string {
	return find(show.cues, id)?.number ?? id;
}

function sayAsFlown(show: Show, flown: AsFlown): CareTopic {
	const { fleet, venue } = show;
	const { tracking } = fleet;
	const assumptions = [
		`Each drone follows its path as a second-order system of ${tracking.frequency} Hz and damping ${tracking.damping}, with ${(1000 * tracking.delay).toFixed(0)} ms of delay and integral action over ${tracking.recovery} s, one quicker or slower than another by up to ${Math.round(100 * tracking.spread)} % of the mean. A model, not your fleet: measure it, and give what you measured.`,
		`Gaps are looked at ${flown.rate} times a second, straight between. The gust is ${venue.gust} m/s on top of ${venue.wind} m/s of wind, comes at once and stays, and strikes one drone of a pair and not the other. Attention is asked for where less than half the spacing is left.`,
	];
	const topic = { id: "as-flown", heading: "As flown", assumptions } as const;
	if (!flown.steady) {
		const sentence = `A delay of ${tracking.delay} s is more than these drones can bear (${flown.delayMargin.toFixed(2)} s), so they would swing up by themselves: give a shorter delay or a lower frequency.`;
		return { ...topic, sentences: [sentence], attention: true };
	}
	const sentences = [
		`Drones lag their paths by about ${flown.lag.toFixed(2)} s, and a gust takes one ${metres(flown.push)} off its place.`,
	];
	const lags = [...flown.legs].sort((a, b) => b.lag.distance - a.lag.distance);
	if (lags.length > 0) {
		const [most] = lags;
		sentences.push(
			`Farthest behind is drone ${most.lag.drone + 1} in cue ${cueNumber(show, most)}, by ${metres(most.lag.distance)} at ${clock(most.lag.time)}.`,
		);
		const late = flown.legs.filter(({ settled }) => settled > 0).sort((a, b) => b.settled - a.settled);
		sentences.push(
			late.length === 0
				? `At every arrival all drones are within ${metres(flown.near)} of their slots.`
				: `${count(late.length, "picture stands", "pictures stand")} late: cue ${cueNumber(show, late[0])} has all drones within ${metres(flown.near)} of their slots only ${late[0].settled.toFixed(1)} s after its arrival.`,
		);
	}
	const { spacing } = fleet.limits;
	const gaps = flown.legs.flatMap((leg) => (leg.gap === null ? [] : [{ leg, ...leg.gap }]));
	gaps.sort((a, b) => a.distance - b.distance);
	let attention = false;
	if (gaps.length > 0) {
		const [{ leg, distance, time, drones }] = gaps;
		sentences.push(
			`The smallest gap as flown is ${distance.toFixed(2)} m (spacing ${spacing} m), drones ${drones[0] + 1} and ${drones[1] + 1} in cue ${cueNumber(show, leg)} at ${clock(time)}; in a gust ${(leg.gapInGust ?? distance).toFixed(2)} m.`,
		);
		const least = (leg.gapInGust ?? distance) - 2 * fleet.positionError;
		sentences.push(
			`Less the position error of both that leaves ${Math.max(0, least).toFixed(2)} m from middle to middle: spacing has to hold this and the drones' own size.`,
		);
		attention = least < spacing / 2;
	}
	return { ...topic, sentences, attention };
}

function sayAirtime({ longest, shortest, limit }: Airtime): CareTopic {
	const over = longest.seconds > limit;
	const rest = over
		? `${(longest.seconds - limit).toFixed(0)} s more than endurance less reserve (${limit.toFixed(0)} s)`
		: `${(limit - longest.seconds).toFixed(0)} s less than endurance less reserve (${limit.toFixed(0)} s)`;
	const sentences = [
		`Drone ${longest.drone + 1} runs longest: ${longest.seconds.toFixed(0)} s from motor start until it is down, ${rest}.`,
	];
	if (longest.seconds - shortest.seconds > 0.5) {
		sentences.push(`Drone ${shortest.drone + 1} runs shortest, ${shortest.seconds.toFixed(0)} s.`);
	}
	return {
		id: "airtime",
		heading: "Motor time",
		sentences,
		attention: over,
		assumptions: [
			"Each drone's motors start when its wave climbs. Waiting on the grid with motors running, a held start and a second try at landing are not in it; cold costs batteries another 20–30 %.",
		],
	};
}
