/**
 * Indices of points along a Z-order curve (Morton 1966): points near in the order are near in space. Ties go by index.
 * @param points 3·N numbers, any unit
 */
export function mortonOrder(points: Float64Array): Int32Array {
	const count = points.length / 3;
	const low = [Infinity, Infinity, Infinity];
	let extent = 0;
	for (let axis = 0; axis < 3; axis++) {
		let high = -Infinity;
		for (let i = 0; i < count; i++) {
			const value = points[3 * i + axis];
			if (value < low[axis]) low[axis] = value;
			if (value > high) high = value;
		}
		extent = Math.max(extent, high - low[axis]);
	}
	const cells = extent > 0 ? 1023 / extent : 0;
	const codes = new Uint32Array(count);
	for (let i = 0; i < count; i++) {
		const x = spread(Math.floor((points[3 * i] - low[0]) * cells));
		const y = spread(Math.floor((points[3 * i + 1] - low[1]) * cells));
		const z = spread(Math.floor((points[3 * i + 2] - low[2]) * cells));
		codes[i] = x | (y << 1) | (z << 2);
	}
	const order = Int32Array.from({ length: count }, (_, i) => i);
	return order.sort((i, j) => codes[i] - codes[j] || i - j);
}

/** Ten bits with two zeros between each. */
function spread(value: number): number {
	let bits = value & 0x3ff;
	bits = (bits | (bits << 16)) & 0x030000ff;
	bits = (bits | (bits << 8)) & 0x0300f00f;
	bits = (bits | (bits << 4)) & 0x030c30c3;
	return (bits | (bits << 2)) & 0x09249249;
}
