/** Whether this tab may write: of all tabs of one browser, one at a time may. */
export interface Lease {
	/** True where this tab got it at once. */
	readonly held: boolean;
	/** Settles when this tab gets it after all, because the other one was closed. Never, where it was held at once. */
	readonly later: Promise<void>;
	release(): void;
}

/** Takes the lease by a Web Lock, which the browser lets go of when the tab ends, however it ends. */
export async function takeLease(name = "starstave-show"): Promise<Lease> {
	let release: () => void = () => {};
	const ended = new Promise<void>((resolve) => {
		release = resolve;
	});
	const held = await new Promise<boolean>((resolve, reject) => {
		navigator.locks
			.request(name, { ifAvailable: true }, (lock) => {
				resolve(lock !== null);
				return lock === null ? undefined : ended;
			})
			.catch(reject);
	});
	const later = held
		? new Promise<void>(() => {})
		: new Promise<void>((resolve, reject) => {
				navigator.locks
					.request(name, () => {
						resolve();
						return ended;
					})
					.catch(reject);
			});
	return { held, later, release };
}
