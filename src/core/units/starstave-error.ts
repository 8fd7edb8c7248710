/** What a user can put right: the place it belongs to decides how the app and the command line show it. */
export type ErrorArea =
	| "soundtrack"
	| "show"
	| "formation"
	| "fleet"
	| "flight"
	| "light"
	| "command"
	| "storage"
	| "program";

/**
 * The one error class for misuse and for what a user can cause. Its message is one sentence that says what, where and
 * what would be right. A transition that can't be flown is never an error: that is data (a verdict).
 */
export class StarstaveError extends Error {
	override readonly name = "StarstaveError";
	readonly area: ErrorArea;

	constructor(area: ErrorArea, message: string, options?: { cause?: unknown }) {
		super(message, options as ErrorOptions | undefined);
		this.area = area;
	}
}

/**
 * Throws unless `value` is a finite number in [least, most].
 * @param what the quantity as the user knows it, with its unit: "spacing in metres"
 * @throws StarstaveError naming the value and the accepted range
 */
export function requireInRange(area: ErrorArea, what: string, value: number, least: number, most: number): void {
	if (Number.isFinite(value) && value >= least && value <= most) return;
	throw new StarstaveError(area, `${what} is ${value}, but must lie between ${least} and ${most}.`);
}
