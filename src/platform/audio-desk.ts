// Tone's index makes an audio context and a worker from a blob as soon as it is loaded; its modules alone do neither.
import { Context } from "tone/build/esm/core/context/Context.js";
import { Gain } from "tone/build/esm/core/context/Gain.js";
import { setContext } from "tone/build/esm/core/context/GlobalContext.js";
import { ToneAudioBuffer } from "tone/build/esm/core/context/ToneAudioBuffer.js";
import { ToneBufferSource } from "tone/build/esm/source/buffer/ToneBufferSource.js";
import type { PlayLine } from "./play-line.ts";

/** The one owner of the audio context: the way from the sources to the loudspeaker, and the audio clock. */
export interface AudioDesk {
	/** Seconds of the audio clock: the next sample that is rendered. */
	now(): number;
	/** Seconds of the audio clock that reach the ear at a frame. @param frameTime as requestAnimationFrame has it */
	heardAt(frameTime: number): number;
	resume(): Promise<void>;
	/** Starts the music along a line. @returns stops it at an instant of the audio clock */
	startMusic(buffer: AudioBuffer, line: PlayLine): (at: number) => void;
	/** @returns takes the click away again, where it has not begun */
	startClick(time: number, isBarStart: boolean): () => void;
	/** @returns ends the ticking */
	everySeconds(seconds: number, tick: () => void): () => void;
	close(): Promise<void>;
}

/** Seconds of a fade so short that it is heard as neither fade nor crack. */
const EDGE = 0.003;
const CLICK_LENGTH = 0.04;

export function openAudioDesk(): AudioDesk {
	const raw = new AudioContext({ latencyHint: "interactive" });
	const context = new Context({ context: raw, clockSource: "timeout", lookAhead: 0, updateInterval: 0.05 });
	setContext(context);
	const toSpeaker = { context };
	const music = new Gain({ ...toSpeaker, gain: 1 });
	const clicks = new Gain({ ...toSpeaker, gain: 0.5 });
	music.connect(raw.destination);
	clicks.connect(raw.destination);
	const [beat, barStart] = [synthesise(raw, 1100), synthesise(raw, 1760)];

	return {
		now: () => raw.currentTime,
		heardAt: (frameTime) => {
			const { contextTime, performanceTime } = raw.getOutputTimestamp();
			// Until the first samples are out there is no stamp, and nothing is heard either.
			if (!performanceTime || contextTime === undefined) return raw.currentTime - (raw.outputLatency || 0);
			return contextTime + (frameTime - performanceTime) / 1000;
		},
		resume: () => raw.resume(),
		startMusic: (buffer, { when, position, rate, loop }) => {
			const source = new AudioBufferSourceNode(raw, { buffer, playbackRate: rate });
			const level = new GainNode(raw, { gain: 1 });
			// The launch comes before the music: the source starts when its first sample is due.
			const start = position < 0 ? when - position / rate : when;
			if (position > 0) {
				level.gain.setValueAtTime(0, start);
				level.gain.linearRampToValueAtTime(1, start + EDGE);
			}
			if (loop !== null) {
				source.loop = true;
				source.loopStart = loop.from;
				source.loopEnd = loop.to;
			}
			source.connect(level).connect(music.input);
			source.start(start, Math.max(0, position));
			source.onended = () => level.disconnect();
			return (at) => {
				level.gain.setValueAtTime(1, Math.max(at - EDGE, raw.currentTime));
				level.gain.linearRampToValueAtTime(0, at);
				source.stop(at);
			};
		},
		startClick: (time, isBarStart) => {
			const source = new ToneBufferSource({ ...toSpeaker, url: new ToneAudioBuffer(isBarStart ? barStart : beat) });
			source.connect(clicks);
			source.onended = () => void source.dispose();
			source.start(time, 0, CLICK_LENGTH);
			return () => {
				if (time > raw.currentTime && !source.disposed) source.dispose();
			};
		},
		everySeconds: (seconds, tick) => {
			const id = context.setInterval(tick, seconds);
			return () => void context.clearInterval(id);
		},
		close: async () => {
			music.dispose();
			clicks.dispose();
			context.dispose();
			if (raw.state !== "closed") await raw.close();
		},
	};
}

/** A short tone that dies away: its attack is its first sample, so that it stands on the beat. */
function synthesise(context: AudioContext, frequency: number): AudioBuffer {
	const rate = context.sampleRate;
	const buffer = new AudioBuffer({ length: Math.ceil(CLICK_LENGTH * rate), sampleRate: rate });
	const samples = buffer.getChannelData(0);
	for (let i = 0; i < samples.length; i++) {
		const t = i / rate;
		samples[i] = Math.cos(2 * Math.PI * frequency * t) * Math.exp(-t / 0.008);
	}
	return buffer;
}
