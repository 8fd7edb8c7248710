export { toMillimetre } from "./place.ts";
export { boxOf, fillFleet, fleetSlotsOf } from "./reserve.ts";
export { sizeToSpacing, stretchShape } from "./size.ts";
export { slotsOf } from "./slots-of.ts";
export { takeoffSlots } from "./takeoff.ts";
