import { useEffect, useState } from "react";
import { Dialog, Heading, Modal, ModalOverlay } from "react-aria-components";
import { useStore } from "zustand";
import { createBeatMap } from "../core/show/index.ts";
import { desk } from "./desk.ts";
import { NumberField } from "./fields/Field.tsx";
import { sayPlace } from "./say-place.ts";
import { useStudio, useStudioState } from "./studio-context.ts";

/** How many beats a bar has from the beat under the ear on. */
export function MetreQuestion() {
	const open = useStore(desk, (state) => state.asksMetre);
	const { commands, player } = useStudio();
	const grid = useStudioState((state) => state.show?.grid ?? null);
	const [beat, setBeat] = useState(0);
	const [metre, setMetre] = useState(4);
	useEffect(() => {
		if (!open || grid === null) return;
		const beatMap = createBeatMap(grid);
		const here = Math.max(0, Math.round(beatMap.positionAt(player.heardAt(performance.now()))));
		setBeat(here);
		setMetre(beatMap.beatsPerBarAt(here));
	}, [open, grid, player]);
	const close = () => desk.setState({ asksMetre: false });
	return (
		<ModalOverlay className="veil" isOpen={open} onOpenChange={(isOpen) => !isOpen && close()} isDismissable>
			<Modal className="floating dialog">
				<Dialog>
					<form
						onSubmit={(event) => {
							event.preventDefault();
							close();
							commands.setMetre(beat, metre);
						}}
					>
						<Heading slot="title">Metre</Heading>
						<p>
							A bar begins at {grid && sayPlace(beat, createBeatMap(grid))}, and from there on every bar has so many
							beats.
						</p>
						<NumberField
							label="beats in a bar"
							value={metre}
							step={1}
							onSet={(value) => {
								const right = Number.isInteger(value) && value >= 1 && value <= 24;
								if (right) setMetre(value);
								return right;
							}}
						/>
						<div className="buttons end">
							<button type="button" onClick={close}>
								Not now
							</button>
							<button type="submit" className="first">
								Set the metre
							</button>
						</div>
					</form>
				</Dialog>
			</Modal>
		</ModalOverlay>
	);
}
