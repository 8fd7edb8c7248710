// Set-up talks on stderr, so that `starstave … --json -` keeps stdout to itself.
export const root = new URL("../../", import.meta.url).pathname;

export function say(text) {
	process.stderr.write(`${text}\n`);
}

export function stop(text) {
	say(text);
	process.exit(1);
}
