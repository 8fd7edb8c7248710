/**
 * A short piece of our own, made by formula, as a WAV: a chord on every beat, a drum on every second, and two parts
 * that sound unlike each other, so that beats, bars and sections can be heard in it.
 */
export interface TrackShape {
	readonly seconds: number;
	/** Beats a minute. */
	readonly bpm?: number;
	/** Hz. */
	readonly sampleRate?: number;
	readonly channels?: number;
}

/** Samples → 16-bit WAV (RIFF, Microsoft and IBM 1991). */
export function writeWav(channels: readonly Float32Array[], sampleRate: number): Uint8Array {
	const length = channels[0].length;
	const block = 2 * channels.length;
	const bytes = new Uint8Array(44 + length * block);
	const view = new DataView(bytes.buffer);
	const tag = (at: number, text: string): void => {
		for (let i = 0; i < text.length; i++) bytes[at + i] = text.charCodeAt(i);
	};
	tag(0, "RIFF");
	view.setUint32(4, 36 + length * block, true);
	tag(8, "WAVEfmt ");
	view.setUint32(16, 16, true);
	view.setUint16(20, 1, true);
	view.setUint16(22, channels.length, true);
	view.setUint32(24, sampleRate, true);
	view.setUint32(28, sampleRate * block, true);
	view.setUint16(32, block, true);
	view.setUint16(34, 16, true);
	tag(36, "data");
	view.setUint32(40, length * block, true);
	for (let i = 0; i < length; i++) {
		channels.forEach((channel, c) => {
			const value = Math.max(-1, Math.min(1, channel[i]));
			view.setInt16(44 + i * block + 2 * c, Math.round(32767 * value), true);
		});
	}
	return bytes;
}

/** Noise that is the same every time (xorshift32, Marsaglia 2003). */
function createNoise(): () => number {
	let state = 0x2545f491;
	return () => {
		state ^= state << 13;
		state ^= state >>> 17;
		state ^= state << 5;
		return state / 2147483648;
	};
}

export function makeTrack({ seconds, bpm = 120, sampleRate = 22050, channels = 1 }: TrackShape): Uint8Array {
	const length = Math.round(seconds * sampleRate);
	const out = new Float32Array(length);
	const noise = createNoise();
	const interval = 60 / bpm;
	const chords = [
		[220, 277.18, 329.63],
		[246.94, 311.13, 369.99],
		[196, 246.94, 293.66],
		[220, 261.63, 329.63],
	];
	for (let beat = 0; beat * interval < seconds; beat++) {
		const start = Math.round(beat * interval * sampleRate);
		const bar = Math.floor(beat / 4);
		const loud = Math.floor(bar / 4) % 2 === 1;
		const chord = chords[bar % 4];
		const most = Math.min(length - start, Math.round(interval * sampleRate));
		for (let i = 0; i < most; i++) {
			const t = i / sampleRate;
			const tone = chord.reduce((sum, hertz) => sum + Math.sin(2 * Math.PI * hertz * (loud ? 2 : 1) * t), 0);
			let value = 0.08 * (loud ? 1.6 : 1) * tone * Math.exp(-4 * t);
			// Bar lines are heavy, back beats are bright, and quiet eighths say which of the two is the beat.
			if (beat % 2 === 0) value += (beat % 4 === 0 ? 0.5 : 0.35) * Math.sin(2 * Math.PI * 60 * t) * Math.exp(-18 * t);
			const eighth = t - Math.floor(t / (interval / 2)) * (interval / 2);
			value += 0.06 * noise() * Math.exp(-90 * eighth);
			if (beat % 2 === 1) value += (loud ? 0.3 : 0.15) * noise() * Math.exp(-40 * t);
			out[start + i] += value;
		}
	}
	return writeWav(
		Array.from({ length: channels }, () => out),
		sampleRate,
	);
}
