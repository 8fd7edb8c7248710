/** Colours and type of the staves, read from the one file of tokens so that canvas and page can't drift apart. */
export interface Inks {
	readonly page: string;
	readonly hairline: string;
	readonly barline: string;
	readonly ink: string;
	readonly quiet: string;
	readonly music: string;
	readonly flight: string;
	readonly flightFill: string;
	readonly trouble: string;
	readonly sans: string;
	readonly serif: string;
}

/** @param host an element below the root that carries the tokens */
export function readInks(host: HTMLElement): Inks {
	const style = getComputedStyle(host);
	const token = (name: string) => style.getPropertyValue(`--${name}`).trim();
	return {
		page: token("page"),
		hairline: token("hairline"),
		barline: token("barline"),
		ink: token("ink"),
		quiet: token("ink-quiet"),
		music: token("music"),
		flight: token("flight"),
		flightFill: token("flight-fill"),
		trouble: token("trouble"),
		sans: token("sans"),
		serif: token("serif"),
	};
}
