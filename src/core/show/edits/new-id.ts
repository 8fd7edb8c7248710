/**
 * An id that no thing of the list has: the letter and the next whole number.
 * @param taken ids in use
 */
export function newId(letter: string, taken: Iterable<string>): string {
	let highest = 0;
	for (const id of taken) {
		if (!id.startsWith(letter)) continue;
		const number = Number(id.slice(letter.length));
		if (Number.isSafeInteger(number) && number > highest) highest = number;
	}
	return `${letter}${highest + 1}`;
}
