import type { Seconds } from "../core/units/index.ts";

/** Sound to be played: one array a channel, −1..1, all of one length. */
export interface Sound {
	/** Hz. */
	readonly sampleRate: number;
	readonly channels: readonly Float32Array[];
}

/** A click on every beat, a higher one where a bar begins. */
export interface ClickTrack {
	/** Seconds, rising. */
	readonly beats: readonly number[];
	/** Indices of the beats that begin a bar. */
	readonly barStarts: ReadonlySet<number>;
}

/** 1 is the music's own tempo; slower also sounds lower. */
export type PlayRate = 0.5 | 0.75 | 1;

export interface PlayerState {
	readonly playing: boolean;
	readonly rate: PlayRate;
	/** Seconds; null: the music is played to its end. */
	readonly loop: { readonly from: Seconds; readonly to: Seconds } | null;
	readonly click: boolean;
}

/** Plays the soundtrack and says where the ear is. Without sound to play, it runs on silence as long as the show is. */
export interface Player {
	readonly state: PlayerState;
	/** Called whenever `state` has changed. @returns takes the listener off */
	subscribe(listener: (state: PlayerState) => void): () => void;
	/** Puts the sound in (null: silence). Stops, and stands at 0. */
	load(sound: Sound | null): Promise<void>;
	/** Seconds that can be played: from `from` (≤ 0, launch comes before the music) to `to`. */
	setSpan(from: Seconds, to: Seconds): void;
	setClicks(clicks: ClickTrack | null): void;
	/** Must be called from a click or a key the first time: browsers want it so. */
	play(): Promise<void>;
	pause(): void;
	seek(seconds: Seconds): void;
	setRate(rate: PlayRate): void;
	setLoop(loop: { readonly from: Seconds; readonly to: Seconds } | null): void;
	setClick(on: boolean): void;
	/**
	 * What is heard at a frame, output latency taken off.
	 * @param frameTime milliseconds as requestAnimationFrame hands them over (`performance.now()` elsewhere)
	 */
	heardAt(frameTime: number): Seconds;
	close(): Promise<void>;
}
