// What is written on the page: bars, tempo, sections, and the short notation that the pieces are written in.
// Positions are beats (quarter notes) from the first bar; the score alone turns them into seconds, and from the
// same figures it writes the truth that the analysis is measured against.

import { chordOf, nearest, pitchOf } from "./pitch.mjs";

/**
 * A score.
 * `form`: [{ letter, name, stretches: [{ bars, beats, bpm, to? }] }]; `to` lets the tempo run evenly, beat by beat,
 * from `bpm` to `to` over the stretch. `start`: seconds from the first sample to the first beat.
 */
export class Score {
	constructor({ file, title, start, form }) {
		this.file = file;
		this.title = title;
		this.start = start;
		this.bars = []; // { beat, beatsPerBar }
		this.sections = []; // { letter, name, firstBar, bars } with bars counted from 1
		this.stretches = []; // { beat, beats, bpm, to, time }
		let beat = 0;
		let time = start;
		for (const { letter, name, stretches } of form) {
			const firstBar = this.bars.length + 1;
			for (const { bars, beats, bpm, to = bpm } of stretches) {
				this.stretches.push({ beat, beats: bars * beats, bpm, to, time });
				for (let i = 0; i < bars; i++) this.bars.push({ beat: beat + i * beats, beatsPerBar: beats });
				beat += bars * beats;
				time = this.secondsAt(beat);
			}
			this.sections.push({ letter, name, firstBar, bars: this.bars.length + 1 - firstBar });
		}
		this.beats = beat;
	}

	/** Seconds of a position in beats; before the first and past the last stretch the tempo there goes on. */
	secondsAt(beat) {
		let stretch = this.stretches[0];
		for (const candidate of this.stretches) if (candidate.beat <= beat + 1e-9) stretch = candidate;
		const { bpm, to, beats, time } = stretch;
		const into = beat - stretch.beat;
		const slope = (to - bpm) / beats;
		// Tempo is linear in beats, so time is the integral of 60 / tempo: a logarithm.
		if (slope === 0) return time + (60 * into) / bpm;
		if (into > beats) return time + (60 / slope) * Math.log(to / bpm) + (60 * (into - beats)) / to;
		return time + (60 / slope) * Math.log((bpm + slope * into) / bpm);
	}

	/** The beat on which a bar starts; bars count from 1 and may carry a fraction in beats: beatOf(9, 2) is bar 9, beat 3. */
	beatOf(bar, beats = 0) {
		const index = bar - 1;
		if (index < this.bars.length) return this.bars[index].beat + beats;
		return this.beats + beats;
	}

	/** First bars of all sections with this letter. */
	barsOf(letter) {
		return this.sections.filter((section) => section.letter === letter).map((section) => section.firstBar);
	}

	/** "A5:3 F#5:1 r:4 | …" from a bar on: lengths in eighths; every bar is checked to be full. */
	melody(bar, text, { velocity = 0.8, transpose = 0, hold = 1 } = {}) {
		const notes = [];
		text.split("|").forEach((measure, i) => {
			let at = this.beatOf(bar + i);
			for (const token of measure.trim().split(/\s+/)) {
				const [name, eighths] = token.split(":");
				const length = Number(eighths) / 2;
				if (name !== "r") notes.push({ at, length: length * hold, pitch: pitchOf(name) + transpose, velocity });
				at += length;
			}
			const missing = this.beatOf(bar + i + 1) - at;
			if (Math.abs(missing) > 1e-9) throw new Error(`${this.title}: bar ${bar + i} lacks ${missing} beats`);
		});
		return shapePhrase(notes);
	}

	/** "D | G/A A | …" from a bar on: [{ at, length, chord }], a bar shared out evenly among its chords. */
	harmony(bar, text) {
		return text.split("|").flatMap((measure, i) => {
			const symbols = measure.trim().split(/\s+/);
			const at = this.beatOf(bar + i);
			const length = (this.beatOf(bar + i + 1) - at) / symbols.length;
			return symbols.map((symbol, j) => ({ at: at + j * length, length, chord: chordOf(symbol) }));
		});
	}

	/**
	 * Strokes: one character a sixteenth, "9" loudest, "1" softest, "." none; spaces are free.
	 * The text is repeated until `bars` bars are full.
	 */
	strokes(bar, bars, text, { pitch = 60, gain = 1 } = {}) {
		const steps = text.replace(/\s/g, "");
		const notes = [];
		const end = this.beatOf(bar + bars);
		for (let at = this.beatOf(bar), i = 0; at < end - 1e-9; at += 0.25, i++) {
			const step = steps[i % steps.length];
			if (step !== ".") notes.push({ at, length: 0.25, pitch, velocity: (gain * Number(step)) / 9 });
		}
		return notes;
	}

	/** The truth: what the analysis should find, in seconds from the first sample. */
	truth(duration) {
		const seconds = (beat) => Number(this.secondsAt(beat).toFixed(6));
		const beats = Array.from({ length: this.beats }, (_, beat) => seconds(beat));
		return {
			title: this.title,
			beats,
			downbeats: this.bars.map(({ beat }) => beats[beat]),
			bars: this.bars,
			sections: this.sections.map(({ letter, name, firstBar, bars }) => ({
				start: seconds(this.beatOf(firstBar)),
				end: seconds(this.beatOf(firstBar + bars)),
				letter,
				name,
			})),
			duration: Number(duration.toFixed(6)),
		};
	}
}

/** A sung line is not level: higher notes a little louder, short ones on the way a little softer. */
function shapePhrase(notes) {
	if (notes.length === 0) return notes;
	const middle = notes.reduce((sum, note) => sum + note.pitch, 0) / notes.length;
	return notes.map((note) => {
		const lift = 1 + 0.012 * (note.pitch - middle) - (note.length < 0.75 ? 0.08 : 0);
		return { ...note, velocity: Math.min(1, note.velocity * lift) };
	});
}

/** Held chords from a harmony and its voicings; a pitch that stays is tied over, as players would. */
export function heldChords(harmony, voicings, { velocity = 0.7, tie = true } = {}) {
	const notes = [];
	let sounding = new Map();
	harmony.forEach(({ at, length }, i) => {
		const next = new Map();
		for (const pitch of voicings[i]) {
			const held = tie ? sounding.get(pitch) : undefined;
			if (held && Math.abs(held.at + held.length - at) < 1e-9) {
				held.length += length;
				next.set(pitch, held);
			} else {
				const note = { at, length, pitch, velocity };
				notes.push(note);
				next.set(pitch, note);
			}
		}
		sounding = next;
	});
	return notes;
}

/** The bass note of every chord, kept near `around` and led by the smaller step. */
export function bassLine(harmony, around) {
	let before = around;
	return harmony.map(({ at, length, chord }) => {
		const close = nearest(chord.bass, before);
		const pitch = Math.abs(close - around) > 8 ? nearest(chord.bass, around) : close;
		before = pitch;
		return { at, length, pitch };
	});
}

/** A second voice under a melody: for every note the highest chord tone at least a minor third below it. */
export function secondVoice(melody, harmony) {
	return melody.map((note) => {
		const { chord } = harmony.findLast(({ at }) => at <= note.at + 1e-9) ?? harmony[0];
		let pitch = note.pitch - 3;
		while (!chord.classes.includes(pitch % 12)) pitch--;
		return { ...note, pitch, velocity: note.velocity * 0.85 };
	});
}

/** Moves or thins a list of notes without touching the original. */
export function vary(notes, change) {
	return notes.map((note) => ({ ...note, ...change(note) }));
}
