/**
 * The chunks of a WAV file (RIFF, Microsoft and IBM 1991; odd chunks are padded by one byte), for what the decoder
 * package leaves undone.
 */
import type { ByteSource } from "./byte-source.ts";

interface Chunk {
	readonly kind: string;
	/** Byte offset of the chunk's content. */
	readonly at: number;
	/** Bytes that the chunk promises; the file may hold fewer. */
	readonly size: number;
}

/** Chunks up to the one that holds the samples; more than a thousand before it are no file that anybody wrote. */
async function listChunks(source: ByteSource): Promise<Chunk[]> {
	const chunks: Chunk[] = [];
	for (let at = 12; at + 8 <= source.size && chunks.length < 1000; ) {
		const head = await source.read(at, at + 8);
		const kind = String.fromCharCode(head[0], head[1], head[2], head[3]);
		const size = new DataView(head.buffer, head.byteOffset).getUint32(4, true);
		chunks.push({ kind, at: at + 8, size });
		if (kind === "data") break;
		at += 8 + size + (size & 1);
	}
	return chunks;
}

/** How the samples of a WAV lie in it. */
export interface WavLayout {
	/** The file's beginning with nothing but `fmt ` before `data`: a chunk of odd size would mislead the decoder. */
	readonly head: Uint8Array;
	/** Byte offset of the samples. */
	readonly start: number;
	/** Said where the data chunk promises more than the file holds: it was cut off on its way. */
	readonly note: string | null;
}

/** @returns null where a chunk that is needed is missing; the decoder then says what is wrong */
export async function layOutWav(source: ByteSource): Promise<WavLayout | null> {
	const chunks = await listChunks(source);
	const format = chunks.find((chunk) => chunk.kind === "fmt ");
	const data = chunks.find((chunk) => chunk.kind === "data");
	if (!format || !data || format.size < 16 || format.at + format.size > source.size) return null;
	const head = new Uint8Array(12 + 8 + format.size + 8);
	head.set(await source.read(0, 12));
	head.set(await source.read(format.at - 8, format.at + format.size), 12);
	head.set(await source.read(data.at - 8, data.at), 20 + format.size);
	const missing = data.at + data.size - source.size;
	const bytesPerSecond = new DataView(head.buffer).getUint32(12 + 8 + 8, true);
	// 0 and all ones are what streaming writers leave behind
	const isPromise = data.size !== 0 && data.size !== 0xffffffff;
	const note =
		isPromise && missing > 0 && bytesPerSecond > 0
			? `The file is cut off: the last ${(missing / bytesPerSecond).toFixed(1)} s are missing; what is there is used.`
			: null;
	return { head, start: data.at, note };
}
