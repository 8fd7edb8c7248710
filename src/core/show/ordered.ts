import type { Ordered } from "./show.ts";

/** List → things by id with their order. Ids are taken to be unique: the reader has checked. */
export function toOrdered<T extends { readonly id: string }>(list: readonly T[]): Ordered<T> {
	const byId: Record<string, T> = {};
	for (const thing of list) byId[thing.id] = thing;
	return { byId, order: list.map((thing) => thing.id) };
}

export function toList<T>(things: Ordered<T>): T[] {
	return things.order.map((id) => things.byId[id]);
}

/** The thing of that id, or undefined; never what every object inherits. */
export function find<T>(things: Ordered<T>, id: string | null): T | undefined {
	return id !== null && Object.hasOwn(things.byId, id) ? things.byId[id] : undefined;
}
