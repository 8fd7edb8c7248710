/** A list of single-precision numbers that grows: for what comes piece by piece and has no length yet. */
export interface Growing {
	readonly length: number;
	/** Room for `count` more numbers, all 0. @returns the array that holds them and where they begin in it */
	extend(count: number): { readonly array: Float32Array; readonly at: number };
	push(value: number): void;
	/** The numbers, in an array of their own. */
	values(): Float32Array;
}

export function createGrowing(): Growing {
	let array = new Float32Array(1024);
	let length = 0;
	const extend = (count: number) => {
		const at = length;
		length += count;
		if (length > array.length) {
			// By half as much again: doubling would leave up to half of the room unused.
			const wider = new Float32Array(Math.max(length, Math.ceil(array.length * 1.5)));
			wider.set(array);
			array = wider;
		}
		return { array, at };
	};
	return {
		get length() {
			return length;
		},
		extend,
		push: (value) => {
			const { array: into, at } = extend(1);
			into[at] = value;
		},
		values: () => array.slice(0, length),
	};
}
