import type { Answer } from "../answer.ts";
import type { Arguments } from "../arguments.ts";
import type { Progress } from "../progress.ts";
import { hearFile, type Track } from "../tracks.ts";

/** What is heard in a track, under the keys of the JSON answer. */
export function describeTrack({ soundtrack, analysis, notes, timing }: Track) {
	return {
		soundtrack,
		tempo: analysis.tempo,
		beats: analysis.beats,
		downbeats: analysis.bars.map((bar) => analysis.beats[bar.beat]),
		bars: analysis.bars,
		sections: analysis.sections.map(({ start, end, letter }) => ({ start, end, letter })),
		confidence: analysis.confidence,
		loudness: {
			integrated: analysis.loudness.integrated,
			shortTerm: analysis.loudness.shortTerm,
			rate: analysis.loudness.rate,
		},
		moments: analysis.moments,
		notes,
		timing,
	};
}

/** LUFS: the absolute gate of ITU-R BS.1770; where nothing passes it there is no loudness to speak of. */
const GATE = -70;

function clock(seconds: number): string {
	const whole = Math.round(seconds);
	return `${Math.floor(whole / 60)}:${String(whole % 60).padStart(2, "0")}`;
}

export async function runAnalyse(given: Arguments, progress: Progress): Promise<Answer> {
	const track = await hearFile(given.operands[0], progress);
	const { analysis, soundtrack } = track;
	const json = describeTrack(track);
	const { integrated } = analysis.loudness;
	const lines = [
		`${soundtrack.file}: ${clock(soundtrack.duration)}, ${soundtrack.sampleRate} Hz, ${soundtrack.channels} ${soundtrack.channels === 1 ? "channel" : "channels"}`,
		analysis.beats.length === 0
			? "No beat was found."
			: `${analysis.tempo.bpm.toFixed(1)} beats a minute, ${analysis.beats.length} beats, ${analysis.bars.length} bars, confidence ${analysis.confidence.toFixed(2)}`,
		integrated > GATE ? `Loudness ${integrated.toFixed(1)} LUFS` : "The soundtrack is silent.",
		...analysis.sections.map(({ start, end, letter }) => `Section ${letter}  ${clock(start)} to ${clock(end)}`),
		...json.notes,
	];
	return { code: 0, json, lines };
}
