import type { Arguments } from "./arguments.ts";
import { requireFree, writeBytes } from "./files.ts";

/** Ends a command: 0 done, 2 done and the answer is no. (1, wrong use or bad input, is an error.) */
export type ExitCode = 0 | 2;

/** What a command found: for programs as JSON, for people as lines. */
export interface Answer {
	readonly code: ExitCode;
	readonly json: unknown;
	readonly lines: readonly string[];
}

/**
 * JSON as every command writes it: typed arrays as lists; numbers that JSON can't hold as null.
 * Numbers of single precision are written with the digits that single precision has.
 */
export function answerJson(value: unknown): string {
	const plain = (_key: string, held: unknown): unknown => {
		if (held instanceof Float32Array) return Array.from(held, (number) => Number(number.toPrecision(7)));
		if (held instanceof Float64Array || held instanceof Int32Array || held instanceof Uint8Array)
			return Array.from(held);
		if (held instanceof Map) return Object.fromEntries(held);
		return held;
	};
	return `${JSON.stringify(value, plain, "\t")}\n`;
}

/** Where the JSON goes is looked at before the work starts. It is replaced without asking: it is an answer, not a work. */
export function requireAnswerPlace(given: Arguments): void {
	const place = given.values.get("--json");
	if (place !== undefined && place !== "-") requireFree(place, true);
}

/** Writes the answer: JSON where `--json` says; lines on stdout unless the JSON is there. */
export function giveAnswer(answer: Answer, given: Arguments): void {
	const place = given.values.get("--json");
	if (place === "-") {
		process.stdout.write(answerJson(answer.json));
		return;
	}
	if (place !== undefined) writeBytes(place, answerJson(answer.json));
	for (const line of answer.lines) process.stdout.write(`${line}\n`);
}
