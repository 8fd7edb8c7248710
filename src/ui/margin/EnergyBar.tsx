import type { FallZone } from "../../core/flight/index.ts";

/** Impact energy on a bar with the marks of the rules beside it: a scale, not a permission. */
export function EnergyBar({ impact }: { impact: FallZone["impact"] }) {
	const most = 1.1 * Math.max(impact.energy, ...impact.marks.map(({ energy }) => energy));
	const share = (energy: number) => `${(100 * energy) / most}%`;
	return (
		<div className="energy-bar" aria-hidden="true">
			<div className="fill" style={{ width: share(impact.energy) }} />
			{impact.marks.map(({ energy, source }) => (
				<div key={source} className="mark" style={{ left: share(energy) }}>
					<span>{energy.toFixed(0)} J</span>
				</div>
			))}
		</div>
	);
}
