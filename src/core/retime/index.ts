export {
	type AnchorPair,
	type EditMap,
	isCarried,
	type Joint,
	newTimeIn,
	oldTimeIn,
	type Stretch,
	type StretchKind,
} from "./edit-map.ts";
export { type MapOptions, mapEdit } from "./map-edit.ts";
export { type Place, placesOf } from "./places.ts";
