/**
 * The fall of a drone that loses power, as a point with quadratic drag: it is slowed by g·|V|²/u² against its motion
 * through the air, V, so that u is the speed at which drag bears its weight (its terminal speed), the same from every
 * side. Seen from the moving air it falls in one upright plane, so wind is added afterwards: where it lands over the
 * ground is wind × time, plus the drift through the air along its first velocity through the air. What this leaves out
 * (tumbling, gliding on one side, wind that changes with height) makes it an estimate and not a bound.
 *
 * Integrated by the classical Runge–Kutta method of fourth order.
 */

/** m/s², standard gravity (ISO 80000-3). */
export const GRAVITY = 9.80665;

/** Seconds a step at most; with much drag, this share of the time u/g in which a fall comes near its terminal speed. */
const LONGEST_STEP = 0.05;
const STEP_SHARE = 1 / 30;
/** Share of the terminal speed by which a fall that has come to it may still differ. */
const STEADY = 1e-9;

/** What a fall has come to at one depth. */
export interface Fall {
	/** Seconds since power was lost. */
	readonly time: number;
	/** Metres through the air, level. */
	readonly drift: number;
	/** m/s: downwards, and level through the air. */
	readonly down: number;
	readonly across: number;
}

/**
 * @param across m/s, level, through the air at the start
 * @param climb m/s upwards at the start; negative while it descends
 * @param terminalSpeed m/s; Infinity: no drag
 * @param depths metres below the start, rising, each ≥ 0
 * @returns the fall at each depth, the last time that it passes it
 */
export function fallThrough(
	across: number,
	climb: number,
	terminalSpeed: number,
	depths: ArrayLike<number>,
): readonly Fall[] {
	const drag = GRAVITY / terminalSpeed ** 2;
	const h = Math.min(LONGEST_STEP, (STEP_SHARE * terminalSpeed) / GRAVITY);
	const falls: Fall[] = [];
	// Level speed, upward speed, drift, height over the start.
	let state: State = [across, climb, 0, 0];
	let time = 0;
	while (falls.length < depths.length) {
		if (Math.hypot(state[0], state[1] + terminalSpeed) < STEADY * terminalSpeed) {
			// Nothing changes any more.
			const left = depths[falls.length] + state[3];
			falls.push({ time: time + left / terminalSpeed, drift: state[2], down: terminalSpeed, across: state[0] });
			continue;
		}
		const next = step(state, drag, h);
		while (falls.length < depths.length && next[1] <= 0 && next[3] <= -depths[falls.length]) {
			const part = crossing(state, drag, -depths[falls.length], h);
			const at = step(state, drag, part);
			falls.push({ time: time + part, drift: at[2], down: -at[1], across: at[0] });
		}
		state = next;
		time += h;
	}
	return falls;
}

type State = [number, number, number, number];

function change([across, up]: State, drag: number): State {
	const pull = drag * Math.hypot(across, up);
	return [-pull * across, -GRAVITY - pull * up, across, up];
}

function step(state: State, drag: number, h: number): State {
	const ahead = (rate: State, by: number): State => [
		state[0] + by * rate[0],
		state[1] + by * rate[1],
		state[2] + by * rate[2],
		state[3] + by * rate[3],
	];
	const a = change(state, drag);
	const b = change(ahead(a, h / 2), drag);
	const c = change(ahead(b, h / 2), drag);
	const d = change(ahead(c, h), drag);
	const mean = (k: number): number => (a[k] + 2 * b[k] + 2 * c[k] + d[k]) / 6;
	return ahead([mean(0), mean(1), mean(2), mean(3)], h);
}

/** Seconds into the step at which the height is passed downwards: the later of the two times, by halving. */
function crossing(state: State, drag: number, height: number, longest: number): number {
	let low = 0;
	let high = longest;
	for (let k = 0; k < 30; k++) {
		const middle = (low + high) / 2;
		const at = step(state, drag, middle);
		if (at[1] > 0 || at[3] > height) low = middle;
		else high = middle;
	}
	return high;
}
