/**
 * A drone that follows its path: on each axis a mass that is pushed at will after a delay, held to the path by a
 * controller with proportional, integral and derivative action. The derivative acts on the drone's own speed and the
 * set point is weighted (Åström & Hägglund, PID Controllers, 2nd ed. 1995, §3.4: two degrees of freedom) so that without
 * delay a move of the path is answered by ω²/(s² + 2ζωs + ω²), the second-order response with its known overshoot and
 * settling, and a push by s/((s + p)(s² + 2ζωs + ω²)): a steady push leaves no error in the end.
 */

export interface Loop {
	/** rad/s, –, 1/s (0: no integral action), s. */
	readonly omega: number;
	readonly damping: number;
	readonly integral: number;
	readonly delay: number;
}

interface Gains {
	readonly position: number;
	readonly setPoint: number;
	readonly integral: number;
	readonly speed: number;
}

function gainsOf({ omega, damping, integral: p }: Loop): Gains {
	return {
		position: omega ** 2 + 2 * damping * omega * p,
		setPoint: omega ** 2,
		integral: omega ** 2 * p,
		speed: 2 * damping * omega + p,
	};
}

/**
 * Seconds of delay with which the loop is at the edge of swinging by itself: phase margin over the frequency at which
 * the open loop's gain is one (Åström & Hägglund 1995, §1.6).
 */
export function delayMargin(loop: Loop): number {
	const { position, integral, speed } = gainsOf(loop);
	// Open loop (k_d s² + k_p s + k_i)/s³: its gain falls with the frequency wherever it is near one.
	const gain = (w: number): number => Math.hypot(integral - speed * w * w, position * w) / w ** 3;
	let [low, high] = [1e-6, 1e6];
	for (let k = 0; k < 200; k++) {
		const middle = Math.sqrt(low * high);
		if (gain(middle) > 1) low = middle;
		else high = middle;
	}
	const w = Math.sqrt(low * high);
	// Phase over −180°: numerator's angle − 270° + 180°.
	const margin = Math.atan2(position * w, integral - speed * w * w) - Math.PI / 2;
	return Math.max(0, margin / w);
}

/** Seconds a step so that the response is true to about half a hundredth. */
export function stepFor(omega: number): number {
	return Math.min(0.01, 0.05 / omega);
}

/**
 * Many followers side by side, several with each loop (the axes of a drone, say), stepped together. The command is held at its value
 * half way through the step, less the delay, between the last ones given (the midpoint rule; ahead of them by the
 * Adams–Bashforth rule of second order where the delay is shorter than that).
 */
export class Followers {
	readonly positions: Float64Array;
	private readonly speeds: Float64Array;
	private readonly sums: Float64Array;
	private readonly errors: Float64Array;
	/** Last commands of each follower, a ring of `depth`. */
	private readonly commands: Float64Array;
	private readonly depth: number;
	private readonly gains: readonly Gains[];
	private readonly delays: Float64Array;
	private readonly step: number;
	/** Followers with each loop. */
	private readonly each: number;
	private count = 0;

	/** @param start where each follower stands at rest, all of the first loop first: as many for each loop */
	constructor(loops: readonly Loop[], start: Float64Array, step: number) {
		this.step = step;
		this.each = start.length / loops.length;
		this.gains = loops.map(gainsOf);
		this.delays = Float64Array.from(loops, ({ delay }) => delay);
		this.depth = Math.ceil(Math.max(...loops.map(({ delay }) => delay)) / step) + 3;
		this.positions = start.slice();
		this.speeds = new Float64Array(start.length);
		this.sums = new Float64Array(start.length);
		this.errors = new Float64Array(start.length);
		this.commands = new Float64Array(start.length * this.depth);
		// At rest on the path the integral holds what the weighted set point leaves open.
		for (let k = 0; k < start.length; k++) {
			const { position, setPoint, integral } = this.gains[Math.floor(k / this.each)];
			this.sums[k] = integral > 0 ? ((position - setPoint) * start[k]) / integral : 0;
		}
	}

	/**
	 * @param path where each should be now
	 * @param push what pushes each over the step, as an acceleration; null for still air
	 */
	advance(path: Float64Array, push: Float64Array | null): void {
		const { positions, speeds, sums, errors, commands, depth, step } = this;
		for (let k = 0; k < positions.length; k++) {
			const loop = Math.floor(k / this.each);
			const gains = this.gains[loop];
			const error = path[k] - positions[k];
			if (this.count > 0) sums[k] += (step * (error + errors[k])) / 2;
			errors[k] = error;
			const command =
				gains.setPoint * path[k] - gains.position * positions[k] + gains.integral * sums[k] - gains.speed * speeds[k];
			const ring = k * depth;
			commands[ring + (this.count % depth)] = command;
			// Steps back from now to the command that acts: negative is ahead of it.
			const back = this.delays[loop] / step - 0.5;
			const whole = Math.max(0, Math.floor(back));
			const newer = this.commandAt(ring, whole);
			const older = this.commandAt(ring, whole + 1);
			const pushed = newer + (older - newer) * (back - whole) + (push === null ? 0 : push[k]);
			positions[k] += step * speeds[k] + (step * step * pushed) / 2;
			speeds[k] += step * pushed;
		}
		this.count++;
	}

	/** Before the first command the drone stood still: no command. */
	private commandAt(ring: number, back: number): number {
		const at = this.count - back;
		return at < 0 ? 0 : this.commands[ring + (at % this.depth)];
	}
}

/** Metres that a push which comes at once and stays takes a drone off its place at most; @param push m/s² */
export function farthestOff(loop: Loop, push: number): number {
	const step = stepFor(loop.omega) / 2;
	const followers = new Followers([loop], new Float64Array(1), step);
	const path = new Float64Array(1);
	const pushes = Float64Array.of(push);
	// The first swing is the largest; it is over well within two periods.
	const steps = Math.ceil((4 * Math.PI) / loop.omega / step) + Math.ceil(loop.delay / step);
	let most = 0;
	for (let k = 0; k < steps; k++) {
		followers.advance(path, pushes);
		most = Math.max(most, Math.abs(followers.positions[0]));
	}
	return most;
}
