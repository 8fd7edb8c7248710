import type { Seconds } from "../core/units/index.ts";
import { type AudioDesk, openAudioDesk } from "./audio-desk.ts";
import { clicksBetween, type PlayLine, positionOn } from "./play-line.ts";
import type { ClickTrack, Player, PlayerState, Sound } from "./player.ts";

/** Seconds ahead of the audio clock at which a change takes effect, so that it can be exact to the sample. */
const AHEAD = 0.02;
/** Seconds: clicks are laid this far ahead, more than the one second between ticks of a page out of sight. */
const CLICKS_AHEAD = 2.5;
const TICK = 0.25;

/**
 * The player on Web Audio. The soundtrack's own samples are the clock: where the ear is follows from the instant at which
 * the source was started, never from a timer.
 */
export function createSoundPlayer(openDesk: () => AudioDesk = openAudioDesk): Player {
	let desk: AudioDesk | null = null;
	let buffer: AudioBuffer | null = null;
	let clicks: ClickTrack | null = null;
	let span = { from: 0, to: 0 };
	let state: PlayerState = { playing: false, rate: 1, loop: null, click: false };
	/** Seconds of the music where it stands while nothing plays. */
	let standing: Seconds = 0;
	let line: PlayLine | null = null;
	let stopMusic: ((at: number) => void) | null = null;
	let stopTicks: (() => void) | null = null;
	let takeBack: (() => void)[] = [];
	/** Instant of the audio clock up to which clicks are laid. */
	let laidTo = 0;
	/** Rises with each load, so that an older one that is still copying gives up. */
	let loads = 0;
	const listeners = new Set<(state: PlayerState) => void>();

	const set = (change: Partial<PlayerState>): void => {
		state = { ...state, ...change };
		for (const listener of listeners) listener(state);
	};
	const within = (seconds: Seconds): Seconds => Math.min(Math.max(seconds, span.from), span.to);

	const layClicks = (): void => {
		if (desk === null || line === null || clicks === null || !state.click) return;
		const to = desk.now() + CLICKS_AHEAD;
		for (const { time, isBarStart } of clicksBetween(line, clicks, laidTo, to)) {
			if (time >= desk.now()) takeBack.push(desk.startClick(time, isBarStart));
		}
		takeBack = takeBack.slice(-64);
		laidTo = to;
	};
	const takeClicksBack = (): void => {
		for (const take of takeBack) take();
		takeBack = [];
		laidTo = Math.max(line?.when ?? 0, desk?.now() ?? 0);
	};

	const stop = (at: number): void => {
		stopMusic?.(at);
		stopMusic = null;
		takeClicksBack();
	};

	/** Plays on from a place, whatever played before. */
	const playFrom = (position: Seconds): void => {
		if (desk === null) return;
		const when = desk.now() + AHEAD;
		stop(when);
		const { rate } = state;
		const loop = loopable(state.loop);
		const inLoop = loop !== null && (position < loop.from || position >= loop.to) ? loop.from : position;
		line = { when, position: inLoop, rate, loop };
		laidTo = when;
		if (buffer !== null && inLoop < buffer.duration) stopMusic = desk.startMusic(buffer, line);
		layClicks();
	};

	/** A loop within the sound, or none. */
	const loopable = (loop: PlayerState["loop"]): PlayerState["loop"] => {
		if (loop === null) return null;
		const from = Math.max(0, loop.from);
		const to = Math.min(loop.to, buffer?.duration ?? span.to);
		return to - from > 0.05 ? { from, to } : null;
	};

	const pauseAt = (position: Seconds): void => {
		if (desk !== null) stop(desk.now() + AHEAD);
		stopTicks?.();
		stopTicks = null;
		line = null;
		standing = within(position);
		if (state.playing) set({ playing: false });
	};

	const heardAt = (frameTime: number): Seconds => {
		if (desk === null || line === null) return standing;
		return Math.min(positionOn(line, desk.heardAt(frameTime)), span.to);
	};

	const tick = (): void => {
		layClicks();
		if (line !== null && heardAt(performance.now()) >= span.to) pauseAt(span.to);
	};

	return {
		get state() {
			return state;
		},
		subscribe: (listener) => {
			listeners.add(listener);
			return () => void listeners.delete(listener);
		},
		load: async (sound) => {
			const load = ++loads;
			pauseAt(0);
			standing = 0;
			buffer = null;
			span = { from: 0, to: 0 };
			set({ loop: null });
			if (sound === null) return;
			const filled = await fillBuffer(sound, () => load === loads);
			if (filled === null) return;
			buffer = filled;
			span = { from: 0, to: filled.duration };
		},
		setSpan: (from, to) => {
			span = { from, to: Math.max(to, from) };
			if (line === null) standing = within(standing);
		},
		setClicks: (next) => {
			clicks = next;
			if (line === null) return;
			takeClicksBack();
			layClicks();
		},
		play: async () => {
			if (state.playing) return;
			desk ??= openDesk();
			set({ playing: true });
			await desk.resume();
			// Paused again while the browser was starting its sound.
			if (!state.playing) return;
			playFrom(standing >= span.to ? Math.max(span.from, 0) : standing);
			stopTicks ??= desk.everySeconds(TICK, tick);
		},
		pause: () => pauseAt(heardAt(performance.now())),
		seek: (seconds) => {
			const to = within(seconds);
			if (line === null) standing = to;
			else playFrom(to);
		},
		setRate: (rate) => {
			const at = heardAt(performance.now());
			set({ rate });
			if (line !== null) playFrom(at);
		},
		setLoop: (loop) => {
			const at = heardAt(performance.now());
			set({ loop: loopable(loop) });
			if (line !== null) playFrom(at);
		},
		setClick: (click) => {
			set({ click });
			takeClicksBack();
			layClicks();
		},
		heardAt,
		close: async () => {
			pauseAt(0);
			listeners.clear();
			await desk?.close();
			desk = null;
		},
	};
}

/** Samples copied at a time: a millisecond or two, so that the page never halts. */
const CHUNK = 1 << 19;

async function fillBuffer({ sampleRate, channels }: Sound, wanted: () => boolean): Promise<AudioBuffer | null> {
	const length = channels[0].length;
	const buffer = new AudioBuffer({ length, sampleRate, numberOfChannels: channels.length });
	for (let channel = 0; channel < channels.length; channel++) {
		for (let at = 0; at < length; at += CHUNK) {
			const part = channels[channel].subarray(at, at + CHUNK) as Float32Array<ArrayBuffer>;
			buffer.copyToChannel(part, channel, at);
			await new Promise((resolve) => setTimeout(resolve, 0));
			if (!wanted()) return null;
		}
	}
	return buffer;
}
