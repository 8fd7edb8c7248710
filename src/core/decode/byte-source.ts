/** A file that is read piece by piece, or bytes that are there already. */
export interface ByteSource {
	/** Bytes. */
	readonly size: number;
	/** Bytes `from` … `to`, both within the file; the answer may be used again by the next read. */
	read(from: number, to: number): Uint8Array | Promise<Uint8Array>;
}

export function sourceOf(bytes: Uint8Array): ByteSource {
	return { size: bytes.length, read: (from, to) => bytes.subarray(from, to) };
}
