import { describe, expect, it } from "vitest";
import type { AudioDesk } from "../../src/platform/audio-desk.ts";
import { createSoundPlayer } from "../../src/platform/sound-player.ts";

const LATENCY = 0.04;

/** An audio desk whose clock the test sets; it remembers which clicks are laid and not taken back. */
function createFakeDesk() {
	const clock = { now: 100 };
	const clicks = new Map<number, boolean>();
	let tick: () => void = () => {};
	const desk: AudioDesk = {
		now: () => clock.now,
		heardAt: () => clock.now - LATENCY,
		resume: async () => {},
		startMusic: () => () => {},
		startClick: (time, isBarStart) => {
			expect(clicks.has(time)).toBe(false);
			clicks.set(time, isBarStart);
			return () => {
				if (time > clock.now) clicks.delete(time);
			};
		},
		everySeconds: (_seconds, given) => {
			tick = given;
			return () => {
				tick = () => {};
			};
		},
		close: async () => {},
	};
	const advance = (seconds: number): void => {
		const end = clock.now + seconds;
		while (clock.now < end) {
			clock.now = Math.min(end, clock.now + 0.25);
			tick();
		}
	};
	return { desk, clock, clicks, advance };
}

async function createPlayer() {
	const fake = createFakeDesk();
	const player = createSoundPlayer(() => fake.desk);
	await player.load(null);
	player.setSpan(-10, 60);
	return { player, ...fake };
}

describe("the player", () => {
	it("says where the ear is: output latency taken off, and never before it began", async () => {
		const { player, clock } = await createPlayer();
		player.seek(5);
		expect(player.heardAt(0)).toBe(5);
		await player.play();
		expect(player.heardAt(0)).toBe(5);
		clock.now += 2;
		// Begun 20 ms after the clock stood at play, heard 40 ms late.
		expect(player.heardAt(0)).toBeCloseTo(5 + 2 - 0.02 - LATENCY, 9);
	});

	it("stands where it was paused, and plays on from there", async () => {
		const { player, clock } = await createPlayer();
		await player.play();
		clock.now += 3;
		const at = player.heardAt(0);
		player.pause();
		expect(player.state.playing).toBe(false);
		clock.now += 3;
		expect(player.heardAt(0)).toBe(at);
		await player.play();
		clock.now += 1;
		expect(player.heardAt(0)).toBeCloseTo(at + 1 - 0.02 - LATENCY, 9);
	});

	it("keeps its place when the rate changes", async () => {
		const { player, clock } = await createPlayer();
		await player.play();
		clock.now += 4;
		const at = player.heardAt(0);
		player.setRate(0.5);
		expect(player.heardAt(0)).toBe(at);
		clock.now += 2;
		expect(player.heardAt(0)).toBeCloseTo(at + (2 - 0.02 - LATENCY) / 2, 9);
	});

	it("stays within the show, launch and landing with it, and stops at its end", async () => {
		const { player, advance } = await createPlayer();
		player.seek(-200);
		expect(player.heardAt(0)).toBe(-10);
		player.seek(58);
		await player.play();
		advance(5);
		expect(player.state.playing).toBe(false);
		expect(player.heardAt(0)).toBe(60);
	});

	it("loops, and leaves the loop where it stands when the loop is taken away", async () => {
		const { player, clock } = await createPlayer();
		player.setLoop({ from: 10, to: 12 });
		await player.play();
		clock.now += 0.02 + LATENCY + 5;
		expect(player.heardAt(0)).toBeCloseTo(11, 9);
		player.setLoop(null);
		clock.now += 0.02 + LATENCY + 5;
		expect(player.heardAt(0)).toBeCloseTo(16, 9);
	});

	it("clicks on every beat once, higher where a bar begins, to the sample of the audio clock", async () => {
		const { player, clicks, clock, advance } = await createPlayer();
		const beats = Array.from({ length: 40 }, (_, i) => 0.25 + i * 0.5);
		player.setClicks({ beats, barStarts: new Set(beats.flatMap((_, i) => (i % 4 === 0 ? [i] : []))) });
		player.setClick(true);
		player.seek(0);
		const began = clock.now + 0.02;
		await player.play();
		advance(8);
		const heard = [...clicks].filter(([time]) => time <= clock.now);
		expect(heard.map(([time]) => Math.round((time - began) * 1e6) / 1e6)).toEqual(beats.slice(0, heard.length));
		expect(heard.length).toBe(16);
		expect(heard.map(([, isBarStart]) => isBarStart)).toEqual(heard.map((_, i) => i % 4 === 0));
	});

	it("takes back the clicks ahead when it is paused or sent elsewhere", async () => {
		const { player, clicks, clock, advance } = await createPlayer();
		player.setClicks({ beats: [1, 2, 3, 4, 5, 6], barStarts: new Set() });
		player.setClick(true);
		await player.play();
		advance(1.5);
		player.pause();
		expect([...clicks.keys()].filter((time) => time > clock.now)).toEqual([]);
	});
});
