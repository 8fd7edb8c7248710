import { type RefObject, useEffect, useState } from "react";

/** Pixels that an element is wide, as it changes. */
export function useWidth(host: RefObject<HTMLElement | null>): number {
	const [width, setWidth] = useState(800);
	useEffect(() => {
		const element = host.current;
		if (!element) return;
		const sizes = new ResizeObserver(() => setWidth(Math.round(element.clientWidth)));
		sizes.observe(element);
		return () => sizes.disconnect();
	}, [host]);
	return width;
}
