import type { Venue } from "../../core/show/index.ts";
import { NumberField } from "../fields/Field.tsx";
import { useStudio, useStudioState } from "../studio-context.ts";

const ENDS = [
	{ end: "from", name: "left end" },
	{ end: "to", name: "right end" },
] as const;

/** The line behind which people stand: the fall zone is held against it. */
export function AudienceFields({ venue }: { venue: Venue }) {
	const { commands } = useStudio();
	const readOnly = useStudioState((state) => state.readOnly !== null);
	const { audience, volume } = venue;
	return (
		<>
			<h3>Audience line</h3>
			{audience === null ? (
				<div className="buttons">
					<button
						type="button"
						disabled={readOnly}
						onClick={() =>
							commands.setVenue({
								audience: { from: [volume.min[0], volume.min[1] - 30], to: [volume.max[0], volume.min[1] - 30] },
							})
						}
					>
						Draw an audience line
					</button>
				</div>
			) : (
				<>
					<div className="fields">
						{ENDS.map(({ end, name }) =>
							(["right", "away"] as const).map((axis, k) => (
								<NumberField
									key={end + axis}
									label={`${name}, ${axis}`}
									unit="m"
									step={5}
									value={audience[end][k]}
									disabled={readOnly}
									onSet={(metres) => {
										const point: [number, number] = [...audience[end]];
										point[k] = metres;
										return commands.setVenue({ audience: { ...audience, [end]: point } });
									}}
								/>
							)),
						)}
					</div>
					<div className="buttons">
						<button type="button" disabled={readOnly} onClick={() => commands.setVenue({ audience: null })}>
							Take the audience line away
						</button>
					</div>
				</>
			)}
		</>
	);
}
