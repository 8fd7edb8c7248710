import { describe, expect, it } from "vitest";
import { nameKeys } from "../../src/ui/keyboard.ts";

const event = (key: string, code: string, held: string[] = []) => ({
	key,
	code,
	ctrlKey: held.includes("ctrl"),
	metaKey: held.includes("meta"),
	altKey: held.includes("alt"),
	shiftKey: held.includes("shift"),
});

describe("names of keys", () => {
	it("are the ones that the list of keys shows", () => {
		expect(nameKeys(event("z", "KeyZ", ["ctrl"]))).toBe("Ctrl+Z");
		expect(nameKeys(event("Z", "KeyZ", ["meta", "shift"]))).toBe("Ctrl+Shift+Z");
		expect(nameKeys(event("ArrowRight", "ArrowRight", ["alt", "shift"]))).toBe("Alt+Shift+Right");
		expect(nameKeys(event(" ", "Space"))).toBe("Space");
		expect(nameKeys(event("Backspace", "Backspace"))).toBe("Delete");
	});

	it("read a shifted digit as the digit on every layout", () => {
		expect(nameKeys(event("!", "Digit1", ["shift"]))).toBe("Shift+1");
		expect(nameKeys(event("1", "Digit1"))).toBe("1");
	});

	it("read a shifted comma as the comma on every layout", () => {
		expect(nameKeys(event("<", "Comma", ["shift"]))).toBe("Shift+,");
		expect(nameKeys(event(":", "Period", ["shift"]))).toBe("Shift+.");
		expect(nameKeys(event(",", "Comma"))).toBe(",");
	});

	it("take a sign as it is", () => {
		expect(nameKeys(event("?", "Slash", ["shift"]))).toBe("?");
		expect(nameKeys(event("+", "Equal", ["shift"]))).toBe("+");
	});
});
