import type { Fleet, Venue } from "../../core/show/index.ts";
import { NumberField } from "../fields/Field.tsx";
import { useStudio, useStudioState } from "../studio-context.ts";

/** How drones fall, follow their paths and stir the air: what Care is worked out from. */
export function AirFields({ fleet, venue }: { fleet: Fleet; venue: Venue }) {
	const { commands } = useStudio();
	const readOnly = useStudioState((state) => state.readOnly !== null);
	const { tracking, wake } = fleet;
	return (
		<>
			<h3>For Care: falling, following, wakes</h3>
			<div className="fields helped">
				<NumberField
					label="gust on top of the wind"
					unit="m/s"
					step={1}
					value={venue.gust}
					help="By how much a gust is faster than the wind."
					disabled={readOnly}
					onSet={(gust) => commands.setVenue({ gust })}
				/>
				<NumberField
					label="terminal speed"
					unit="m/s"
					step={1}
					value={fleet.terminalSpeed}
					help="How fast a drone falls in the end with its motors dead."
					disabled={readOnly}
					onSet={(terminalSpeed) => commands.setFleet({ terminalSpeed })}
				/>
				<NumberField
					label="natural frequency"
					unit="Hz"
					step={0.1}
					value={tracking.frequency}
					help="How quickly a drone answers its path: higher lags less."
					disabled={readOnly}
					onSet={(frequency) => commands.setFleet({ tracking: { ...tracking, frequency } })}
				/>
				<NumberField
					label="damping"
					step={0.05}
					value={tracking.damping}
					help="Below 1 it swings past its slot; 1 comes to it without."
					disabled={readOnly}
					onSet={(damping) => commands.setFleet({ tracking: { ...tracking, damping } })}
				/>
				<NumberField
					label="recovery"
					unit="s"
					step={0.5}
					value={tracking.recovery}
					help="In how long it makes up for a steady push of the wind."
					disabled={readOnly}
					onSet={(recovery) => commands.setFleet({ tracking: { ...tracking, recovery } })}
				/>
				<NumberField
					label="delay"
					unit="s"
					step={0.01}
					value={tracking.delay}
					help="From what it senses until its motors answer."
					disabled={readOnly}
					onSet={(delay) => commands.setFleet({ tracking: { ...tracking, delay } })}
				/>
				<NumberField
					label="difference of drones, share"
					step={0.05}
					value={tracking.spread}
					help="By how much drones of the fleet are quicker or slower than the mean."
					disabled={readOnly}
					onSet={(spread) => commands.setFleet({ tracking: { ...tracking, spread } })}
				/>
				<NumberField
					label="wake, radius"
					unit="m"
					step={0.1}
					value={wake.radius}
					help="How far aside the air is felt that a drone throws down."
					disabled={readOnly}
					onSet={(radius) => commands.setFleet({ wake: { ...wake, radius } })}
				/>
				<NumberField
					label="wake, reach"
					unit="m"
					step={1}
					value={wake.reach}
					help="How far below a drone its wake is felt."
					disabled={readOnly}
					onSet={(reach) => commands.setFleet({ wake: { ...wake, reach } })}
				/>
			</div>
		</>
	);
}
