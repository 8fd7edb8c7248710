import { type ErrorArea, StarstaveError } from "../core/units/index.ts";

/** What crosses between a client and a worker. One job at a time runs in a worker. */
export interface JobRequest {
	readonly id: number;
	readonly kind: string;
	readonly ask: unknown;
}

export type JobReply =
	| { readonly id: number; readonly type: "progress"; readonly share: number | null; readonly stage: string }
	| { readonly id: number; readonly type: "done"; readonly answer: unknown }
	| { readonly id: number; readonly type: "failed"; readonly error: ErrorMessage };

/** An error as plain data: classes don't survive the crossing. */
export interface ErrorMessage {
	/** Null where it is no StarstaveError, so a fault of the program. */
	readonly area: ErrorArea | null;
	readonly message: string;
	readonly stack: string | null;
}

export function packError(error: unknown): ErrorMessage {
	const stack = error instanceof Error ? (error.stack ?? null) : null;
	if (error instanceof StarstaveError) return { area: error.area, message: error.message, stack };
	return { area: null, message: error instanceof Error ? error.message : String(error), stack };
}

/** What the user caused comes out as the StarstaveError that it was; a fault of the program as a plain Error. */
export function unpackError({ area, message, stack }: ErrorMessage): Error {
	const cause = stack === null ? undefined : { cause: stack };
	return area === null ? new Error(message, cause) : new StarstaveError(area, message, cause);
}

/**
 * The buffers of all typed arrays in an answer, each once, so that they are handed over instead of copied. Lists of
 * plain numbers and text are not walked through.
 */
export function buffersIn(value: unknown): ArrayBuffer[] {
	const found = new Set<ArrayBuffer>();
	const waiting: unknown[] = [value];
	while (waiting.length > 0) {
		const next = waiting.pop();
		if (next === null || typeof next !== "object") continue;
		if (ArrayBuffer.isView(next)) {
			if (next.buffer instanceof ArrayBuffer) found.add(next.buffer);
		} else if (next instanceof Map) waiting.push(...next.values());
		else if (Array.isArray(next)) {
			if (typeof next[0] === "object") for (const one of next) waiting.push(one);
		} else if (Object.getPrototypeOf(next) === Object.prototype) {
			for (const one of Object.values(next)) waiting.push(one);
		}
	}
	return [...found];
}
