import { describe, expect, test } from "vitest";
import { moveEdge, placesOf } from "../../../src/core/retime/index.ts";
import { StarstaveError } from "../../../src/core/units/index.ts";
import { carriedOf, makeMap } from "./made-maps.ts";

const cutMap = makeMap(60, 44, [
	[0, 16, 0, 16],
	[32, 60, 16, 44],
]);

describe("an edge that is dragged", () => {
	test("the end of a stretch moves along its line and the neighbour gives way along its own", () => {
		const map = moveEdge(cutMap, 0, "end", 18);
		expect(carriedOf(map).map((stretch) => [...stretch.old, ...stretch.new])).toEqual([
			[0, 18, 0, 18],
			[34, 60, 18, 44],
		]);
		expect(map.stretches.map(({ kind }) => kind)).toEqual(["kept", "cut", "kept"]);
		expect(map.joints).toEqual([{ at: 18, spread: 0, ambiguous: null }]);
		expect(placesOf(map, 17)[0].time).toBe(17);
		expect(placesOf(map, 33)).toEqual([]);
	});

	test("the start of a stretch dragged back takes the end of the one before with it", () => {
		const index = cutMap.stretches.findIndex((stretch) => stretch.old[0] === 32);
		const map = moveEdge(cutMap, index, "start", 12.5);
		expect(carriedOf(map).map((stretch) => [...stretch.old, ...stretch.new])).toEqual([
			[0, 12.5, 0, 12.5],
			[28.5, 60, 12.5, 44],
		]);
	});

	test("an edge never leaves either soundtrack nor passes its stretch's other end", () => {
		const intro = makeMap(60, 67, [[0, 60, 7, 67]]);
		const index = intro.stretches.findIndex(({ kind }) => kind === "kept");
		expect(carriedOf(moveEdge(intro, index, "start", -5))[0].new).toEqual([7, 67]);
		const [short] = carriedOf(moveEdge(intro, index, "start", 500));
		expect(short.new[1] - short.new[0]).toBeCloseTo(0.1, 9);
		expect(carriedOf(moveEdge(intro, index, "end", 500))[0].new).toEqual([7, 67]);
	});

	test("an edge beside new music leaves the new music longer", () => {
		const map = makeMap(60, 70, [
			[0, 16, 0, 16],
			[16, 60, 26, 70],
		]);
		const next = moveEdge(map, 0, "end", 14);
		expect(next.stretches.map(({ kind, old, new: to }) => [kind, ...old, ...to])).toEqual([
			["kept", 0, 14, 0, 14],
			["cut", 14, 16, 14, 14],
			["inserted", 14, 14, 14, 26],
			["kept", 16, 60, 26, 70],
		]);
	});

	test("what carries no old music has no edge to move", () => {
		const cut = cutMap.stretches.findIndex(({ kind }) => kind === "cut");
		expect(() => moveEdge(cutMap, cut, "end", 3)).toThrow(StarstaveError);
		expect(() => moveEdge(cutMap, 99, "end", 3)).toThrow(/99/);
	});
});
