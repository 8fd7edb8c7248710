// Names of notes and chords, and the leading of voices from chord to chord. Pitches are MIDI numbers (A4 = 69).

const STEPS = { C: 0, D: 2, E: 4, F: 5, G: 7, A: 9, B: 11 };

// Semitones above the root, in the order of importance: what comes first is voiced first.
const QUALITIES = {
	"": [0, 4, 7],
	m: [0, 3, 7],
	add9: [0, 4, 7, 2],
	madd9: [0, 3, 7, 2],
	6: [0, 4, 7, 9],
	m6: [0, 3, 7, 9],
	7: [0, 4, 10, 7],
	m7: [0, 3, 10, 7],
	maj7: [0, 4, 11, 7],
	maj9: [0, 4, 11, 2],
	m9: [0, 3, 10, 2],
	sus4: [0, 5, 7],
	"7sus4": [0, 5, 10, 7],
	m7b5: [0, 3, 6, 10],
};

/** Seconds⁻¹ of a MIDI pitch, equal temperament on A4 = 440 Hz. */
export function hertz(pitch) {
	return 440 * 2 ** ((pitch - 69) / 12);
}

function pitchClass(name) {
	const found = /^([A-G])([#b]?)$/.exec(name);
	if (!found) throw new Error(`no note is called "${name}"`);
	const bend = found[2] === "#" ? 1 : found[2] === "b" ? -1 : 0;
	return (STEPS[found[1]] + bend + 12) % 12;
}

/** "F#4" → 66. */
export function pitchOf(name) {
	const found = /^([A-G])([#b]?)(\d)$/.exec(name);
	if (!found) throw new Error(`no note is called "${name}"`);
	const bend = found[2] === "#" ? 1 : found[2] === "b" ? -1 : 0;
	return 12 * (Number(found[3]) + 1) + STEPS[found[1]] + bend;
}

/** "Gm6/Bb" → { name, classes: pitch classes by importance, bass: pitch class }. */
export function chordOf(symbol) {
	const [upper, under] = symbol.split("/");
	const found = /^([A-G][#b]?)(.*)$/.exec(upper);
	const intervals = found && QUALITIES[found[2]];
	if (!intervals) throw new Error(`no chord is called "${symbol}"`);
	const root = pitchClass(found[1]);
	return {
		name: symbol,
		classes: intervals.map((interval) => (root + interval) % 12),
		bass: under ? pitchClass(under) : root,
	};
}

/** The pitch of this class that lies nearest to a given pitch. */
export function nearest(pitchClassWanted, pitch) {
	const up = (((pitchClassWanted - pitch) % 12) + 12) % 12;
	return up > 6 ? pitch + up - 12 : pitch + up;
}

function* voicings(classes, voices, low, high) {
	const choice = [];
	// Pitches rise strictly; neighbours in the upper voices stay within a ninth, as in a choir.
	function* fill(from) {
		if (choice.length === voices) {
			yield choice.slice();
			return;
		}
		for (let pitch = from; pitch <= high; pitch++) {
			if (!classes.includes(pitch % 12)) continue;
			if (choice.length > 0 && pitch - choice[choice.length - 1] > 14) return;
			choice.push(pitch);
			yield* fill(pitch + 1);
			choice.pop();
		}
	}
	yield* fill(low);
}

function costOf(voicing, before, chord, centre) {
	const needed = Math.min(voicing.length, chord.classes.length);
	const heard = new Set(voicing.map((pitch) => pitch % 12));
	let cost = 0;
	for (let i = 0; i < needed; i++) if (!heard.has(chord.classes[i])) cost += i === 0 ? 4 : 9;
	const mean = voicing.reduce((sum, pitch) => sum + pitch, 0) / voicing.length;
	cost += 0.35 * Math.abs(mean - centre);
	for (let i = 1; i < voicing.length; i++) if (voicing[i] - voicing[i - 1] < 2) cost += 3;
	if (!before) return cost;
	for (let i = 0; i < voicing.length; i++) {
		const step = voicing[i] - before[i];
		cost += Math.abs(step) + (Math.abs(step) > 5 ? 3 : 0);
		// Parallel fifths and octaves with a moving pair of voices.
		for (let j = 0; j < i; j++) {
			const interval = (voicing[i] - voicing[j]) % 12;
			const earlier = (before[i] - before[j]) % 12;
			if (step !== 0 && interval === earlier && (interval === 7 || interval === 0)) cost += 4;
		}
	}
	return cost;
}

/**
 * Voices a row of chords so that each voice moves little: for every chord the cheapest voicing after the one before.
 * `harmony` is a list of { chord }; answers a list of rising pitch lists, one for each chord.
 */
export function leadVoices(harmony, { voices = 4, low = 52, high = 76 } = {}) {
	const centre = (low + high) / 2;
	let before = null;
	return harmony.map(({ chord }) => {
		let best = null;
		let bestCost = Number.POSITIVE_INFINITY;
		for (const voicing of voicings(chord.classes, voices, low, high)) {
			const cost = costOf(voicing, before, chord, centre);
			if (cost < bestCost) {
				best = voicing;
				bestCost = cost;
			}
		}
		if (!best) throw new Error(`${chord.name} has no voicing between ${low} and ${high}`);
		before = best;
		return best;
	});
}
