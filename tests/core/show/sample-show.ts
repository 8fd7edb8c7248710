/** A small show as it may stand in a file, with every kind of thing in it; a fresh copy at every call. */
export function sampleFile() {
	return {
		format: "starstave-show",
		version: 1,
		title: "Harbour night",
		soundtrack: { file: "harbour.wav", sha256: "ab".repeat(32), duration: 60, sampleRate: 48000, channels: 2 },
		grid: {
			beats: Array.from({ length: 100 }, (_, i) => 0.5 + 0.5 * i),
			bars: Array.from({ length: 25 }, (_, i) => ({ beat: 4 * i, beatsPerBar: 4 })),
		},
		sections: [
			{ id: "s1", name: "Verse", letter: "A", from: 0, to: 32 },
			{ id: "s2", name: "Chorus", letter: "B", from: 32, to: 64 },
		],
		fleet: { count: 12 },
		opening: "f1",
		formations: [
			{ id: "f1", name: "Ring", shape: { kind: "ring", count: 12, radius: 10 }, place: { position: [0, 0, 40] } },
			{
				id: "f2",
				name: "Heart",
				shape: {
					kind: "points",
					points: Array.from({ length: 8 }, (_, i) => [3 * i, 0, 20.125 + i]),
				},
				colours: Array.from({ length: 8 }, () => "#ff2040"),
				groups: { left: [0, 1, 2], right: [5, 6, 7] },
			},
		],
		groups: [{ id: "g1", name: "new motors", drones: [0, 11] }],
		cues: [
			{ id: "c1", number: "1", kind: "intensity", at: -4, level: 0 },
			{ id: "c2", number: "2", kind: "colour", at: 0, paint: { kind: "flat", colour: "#3366ff" }, fade: 2 },
			{ id: "c3", number: "12", kind: "transition", at: 20, length: 12, formation: "f2" },
			{ id: "c4", number: "12.5", kind: "colour", at: 32, paint: { kind: "picture" }, group: "left", called: true },
			{
				id: "c5",
				number: "13",
				kind: "intensity",
				at: 40,
				pinned: 21.3,
				level: { follow: "loudness", from: 0.2, to: 1 },
			},
		],
	};
}
export type SampleFile = ReturnType<typeof sampleFile>;

/** The sample's text after a change. */
export function sampleText(change?: (file: SampleFile & Record<string, unknown>) => void): string {
	const file = sampleFile() as SampleFile & Record<string, unknown>;
	change?.(file);
	return JSON.stringify(file);
}
