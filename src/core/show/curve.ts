/** A curve of the music that intensity can follow: loudness, low, middle, high, onset. */
export interface Curve {
	readonly name: string;
	/** Values a second; value i stands at i / rate seconds. */
	readonly rate: number;
	/** 0..1. */
	readonly values: Float32Array;
}
