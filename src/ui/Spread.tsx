import { type RefObject, useEffect, useMemo, useRef, useState } from "react";
import { useStore } from "zustand";
import { listActions } from "./actions.ts";
import { CommandFinder } from "./CommandFinder.tsx";
import { desk } from "./desk.ts";
import { EmptyDesk } from "./EmptyDesk.tsx";
import { KeysList } from "./KeysList.tsx";
import { attachKeyboard } from "./keyboard.ts";
import { Masthead } from "./Masthead.tsx";
import { MetreQuestion } from "./MetreQuestion.tsx";
import { Margin } from "./margin/Margin.tsx";
import { NightPane } from "./NightPane.tsx";
import { Notices } from "./Notices.tsx";
import { NewEditPane } from "./new-edit/NewEditPane.tsx";
import { RoughCutQuestion } from "./RoughCutQuestion.tsx";
import { StavesPane } from "./StavesPane.tsx";
import { useStudio, useStudioState } from "./studio-context.ts";
import { Tapping } from "./Tapping.tsx";
import { TransportBar } from "./TransportBar.tsx";
import { useFrameLoop } from "./use-frame.ts";

/** The open spread: the music on the left-hand page, the sky and the margin on the right. */
export function Spread() {
	const studio = useStudio();
	const loop = useFrameLoop();
	const file = useRef<HTMLInputElement>(null);
	const editFile = useRef<HTMLInputElement>(null);
	const [dropping, setDropping] = useState(false);
	const started = useStudioState((state) => state.started);
	const hasShow = useStudioState((state) => state.show !== null);
	const readOnly = useStudioState((state) => state.readOnly);
	const strip = useStore(desk, (state) => state.strip !== null);
	const newEdit = useStudioState((state) => state.newEdit);
	const actions = useMemo(
		() =>
			listActions({
				studio,
				loop,
				chooseFile: () => file.current?.click(),
				chooseEdit: () => editFile.current?.click(),
			}),
		[studio, loop],
	);
	useEffect(() => attachKeyboard(actions), [actions]);

	return (
		<main
			className={newEdit !== null ? "spread editing" : strip ? "spread strip" : "spread"}
			onDragOver={(event) => {
				event.preventDefault();
				setDropping(true);
			}}
			onDragLeave={(event) => {
				if (!event.currentTarget.contains(event.relatedTarget as Node | null)) setDropping(false);
			}}
			onDrop={(event) => {
				event.preventDefault();
				setDropping(false);
				const dropped = event.dataTransfer.files[0];
				if (dropped) void studio.commands.openFile(dropped);
			}}
		>
			<HiddenFile
				host={file}
				label="Open a soundtrack or a show"
				accept={`${SOUNDS},.json,.starstave`}
				open={(chosen) => void studio.commands.openFile(chosen)}
			/>
			<HiddenFile
				host={editFile}
				label="Open a new edit of the music"
				accept={SOUNDS}
				open={(chosen) => void studio.commands.openNewEdit(chosen)}
			/>
			<section className="left" aria-label="Music">
				<Masthead actions={actions} />
				{readOnly !== null && (
					<p className="band" role="status">
						{readOnly}
					</p>
				)}
				{newEdit !== null && <NewEditPane edit={newEdit} />}
				{newEdit === null && hasShow && <TransportBar />}
				{newEdit === null && (hasShow ? <StavesPane /> : started && <EmptyDesk choose={() => file.current?.click()} />)}
			</section>
			<div className="right">
				<NightPane />
				<Margin />
			</div>
			<Notices />
			<RoughCutQuestion />
			<MetreQuestion />
			<Tapping />
			<CommandFinder actions={actions} />
			<KeysList actions={actions} />
			{dropping && <div className="drop-veil">Let go to open the soundtrack or show</div>}
		</main>
	);
}

const SOUNDS = "audio/*,.wav,.mp3,.flac,.ogg,.opus,.m4a,.aac";

/** The browser's file dialog behind an action. */
function HiddenFile(props: {
	host: RefObject<HTMLInputElement | null>;
	label: string;
	accept: string;
	open: (file: File) => void;
}) {
	return (
		<input
			ref={props.host}
			type="file"
			className="unseen"
			tabIndex={-1}
			aria-label={props.label}
			accept={props.accept}
			onChange={(event) => {
				const chosen = event.target.files?.[0];
				if (chosen) props.open(chosen);
				event.target.value = "";
			}}
		/>
	);
}
