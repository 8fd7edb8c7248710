/**
 * The chunks of a WAV file (RIFF, Microsoft and IBM 1991; odd chunks are padded by one byte), for what the decoder
 * package leaves undone.
 */
interface Chunk {
	readonly kind: string;
	/** Byte offset of the chunk's content. */
	readonly at: number;
	/** Bytes that the chunk promises; the file may hold fewer. */
	readonly size: number;
}

function listChunks(bytes: Uint8Array): Chunk[] {
	const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
	const chunks: Chunk[] = [];
	for (let at = 12; at + 8 <= bytes.length; ) {
		const kind = String.fromCharCode(bytes[at], bytes[at + 1], bytes[at + 2], bytes[at + 3]);
		const size = view.getUint32(at + 4, true);
		chunks.push({ kind, at: at + 8, size });
		if (kind === "data") break;
		at += 8 + size + (size & 1);
	}
	return chunks;
}

/** The same WAV with nothing but `fmt ` before `data` where a chunk of odd size would mislead the decoder. */
export function straightenWav(bytes: Uint8Array): Uint8Array {
	const chunks = listChunks(bytes);
	const format = chunks.find((chunk) => chunk.kind === "fmt ");
	const data = chunks.find((chunk) => chunk.kind === "data");
	if (!format || !data || chunks.every((chunk) => chunk === data || chunk.size % 2 === 0)) return bytes;
	const head = bytes.subarray(0, 12);
	const formatChunk = bytes.subarray(format.at - 8, format.at + format.size);
	const dataChunk = bytes.subarray(data.at - 8);
	const straight = new Uint8Array(head.length + formatChunk.length + dataChunk.length);
	straight.set(head);
	straight.set(formatChunk, head.length);
	straight.set(dataChunk, head.length + formatChunk.length);
	return straight;
}

/** Adds a note where the data chunk promises more than the file holds: it was cut off on its way. */
export function describeWav(bytes: Uint8Array, notes: string[]): void {
	const chunks = listChunks(bytes);
	const format = chunks.find((chunk) => chunk.kind === "fmt ");
	const data = chunks.find((chunk) => chunk.kind === "data");
	// 0 and all ones are what streaming writers leave behind
	if (!format || !data || data.size === 0 || data.size === 0xffffffff) return;
	const missing = data.at + data.size - bytes.length;
	const bytesPerSecond = new DataView(bytes.buffer, bytes.byteOffset).getUint32(format.at + 8, true);
	if (missing <= 0 || bytesPerSecond === 0) return;
	const seconds = (missing / bytesPerSecond).toFixed(1);
	notes.push(`The file is cut off: the last ${seconds} s are missing; what is there is used.`);
}
