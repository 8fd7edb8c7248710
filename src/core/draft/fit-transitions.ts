import type { TransitionCheck } from "../flight/index.ts";
import type { BeatMap, Formation } from "../show/index.ts";
import { breathe } from "./repertoire.ts";

/** The picture that stands from `at` on, and the transition that brings it there. */
export interface Turn {
	/** Arrival, beats: a downbeat. */
	readonly at: number;
	/** Of the transition, beats. */
	readonly length: number;
	readonly formation: Formation;
	/** True once its figure was given up for a nearer one. */
	readonly nearer: boolean;
}

/** Beats that a transition may take that arrives at `at` where the picture before has stood since `since`. */
export function windowBefore(at: number, since: number, isFirst: boolean): number {
	return at - since - (isFirst ? 0 : HOLD);
}

/** Share of the time that stays in hand, so that no verdict is tight. */
const SPARE = 0.14;
/** Shortest hold between an arrival and the next departure, beats. */
const HOLD = 2;

/**
 * Lengths set by what each transition needs; where the music gives no time, the picture that stands grows or shrinks a
 * little instead; where even that is too much, the turn goes.
 * @param checks in the order of turns 1 … (turn 0 is the opening)
 * @returns null when nothing has to change
 */
export function fitTransitions(
	turns: readonly Turn[],
	checks: readonly TransitionCheck[],
	beatMap: BeatMap,
): Turn[] | null {
	const fitted: Turn[] = [turns[0]];
	let changed = false;
	for (let i = 1; i < turns.length; i++) {
		const turn = turns[i];
		const check = checks[i - 1];
		const before = fitted[fitted.length - 1];
		const window = windowBefore(turn.at, before.at, fitted.length === 1);
		const length = check.needed === null ? null : lengthFor(check.needed, turn.at, beatMap);
		const spatial = check.verdicts.includes("too-close") || check.verdicts.includes("out-of-venue");
		if (length !== null && !spatial && length <= window) {
			changed ||= Math.abs(length - turn.length) > 1e-9;
			fitted.push({ ...turn, length });
			continue;
		}
		changed = true;
		if (turn.nearer) continue;
		const length0 = Math.max(1, Math.min(turn.length, window));
		fitted.push({ ...turn, formation: breathe(before.formation), length: length0, nearer: true });
	}
	return changed ? fitted : null;
}

/** Whole beats that hold `needed` seconds before `at`, some in hand; at least four, unless the music is slow. */
export function lengthFor(needed: number, at: number, beatMap: BeatMap): number {
	const wanted = needed * (1 + SPARE) + 0.05;
	let length = 1;
	while (beatMap.secondsAt(at) - beatMap.secondsAt(at - length) < Math.max(wanted, 2)) length++;
	return length;
}
