/** The report's own style: for the screen and for A4 paper, in black on white, without anything from elsewhere. */
export const REPORT_STYLE = `
:root { color-scheme: light; }
body { font: 10.5pt/1.45 "Source Serif 4", Georgia, "Times New Roman", serif; color: #16181d; background: #fff; margin: 2.5rem auto; max-width: 66rem; padding: 0 1.5rem; }
h1 { font-size: 22pt; line-height: 1.15; margin: 0 0 .15em; font-weight: 600; }
h2 { font-size: 14pt; font-weight: 600; margin: 2.2em 0 .6em; padding-bottom: .2em; border-bottom: 1.5px solid #16181d; break-after: avoid; }
h2 small { font: 8.5pt system-ui, sans-serif; color: #555; float: right; padding-top: .55em; }
h3 { font-size: 11pt; margin: 1.4em 0 .3em; break-after: avoid; }
p, ul { margin: .35em 0 .7em; max-width: 46rem; } ul { padding-left: 1.2em; } li { margin: .25em 0; }
table { border-collapse: collapse; width: 100%; font: 8.5pt/1.35 system-ui, sans-serif; font-variant-numeric: tabular-nums; margin: .6em 0 1em; }
th { text-align: left; vertical-align: bottom; font-weight: 600; color: #444; border-bottom: 1.5px solid #777; padding: .3em .9em .3em 0; }
td { border-bottom: 1px solid #ddd; padding: .3em .9em .3em 0; text-align: left; vertical-align: top; }
tr, .topic, figure { break-inside: avoid; } thead { display: table-header-group; }
.flight td { white-space: nowrap; } .flight td:nth-child(2) { white-space: normal; } .narrow { max-width: 46rem; } .facts { color: #444; font-family: system-ui, sans-serif; font-size: 9pt; overflow-wrap: anywhere; max-width: none; }
.answer { font-size: 15pt; font-weight: 600; margin: 1em 0 .4em; padding-left: .7em; border-left: 5px solid #16181d; }
.draft { border: 2px solid #16181d; padding: .6em 1em; font-weight: 600; max-width: none; }
.cautions { border: 1.5px solid #16181d; padding: .3em 1.2em .5em; margin: 1.2em 0; break-inside: avoid; } .cautions h2 { border: 0; margin: .5em 0 0; padding: 0; }
.mark { font: 600 8pt system-ui, sans-serif; border: 1px solid #16181d; border-radius: 2px; padding: .1em .5em; margin-left: .6em; vertical-align: 1px; }
.rests { font-size: 9pt; color: #555; }
.broken { font-weight: 700; text-decoration: underline; }
.plan { float: right; width: 44%; margin: .2em 0 1em 2em; } .plan svg { width: 100%; max-height: 110mm; background: #fafaf7; border: 1px solid #ddd; }
figcaption { font: 8pt/1.5 system-ui, sans-serif; color: #444; }
.plan * { vector-effect: non-scaling-stroke; } .volume { fill: none; stroke: #16181d; stroke-width: 1.2; } .buffer { fill: none; stroke: #777; stroke-width: 1; stroke-dasharray: 2 3; }
.zone { fill: #d9480f22; stroke: #b23c0c; stroke-width: 1.8; stroke-dasharray: 8 4; } .audience, .ruler { stroke: #16181d; stroke-width: 4; } .ruler { stroke-width: 2; } .seat { fill: none; stroke: #16181d; stroke-width: 1.5; } .place { fill: #777; } .blocked { fill: #0003; stroke: #16181d; }
.key { white-space: nowrap; margin-right: .6em; } .key::before { content: ""; display: inline-block; width: 1.8em; margin-right: .4em; vertical-align: middle; border-top: 2px dashed #b23c0c; } .volume-key::before { border-top: 2px solid #16181d; } .buffer-key::before { border-top: 2px dotted #777; } .audience-key::before { border-top: 4px solid #16181d; }
.energy { display: block; width: 100%; max-width: 30rem; font: 5.5px system-ui, sans-serif; } .energy rect { fill: #8a8d96; } .energy line { stroke: #16181d; stroke-width: .8; } .energy text { fill: #16181d; }
.decision td { height: 2.4em; vertical-align: bottom; } .decision td:first-child { width: 40%; }
.after { clear: both; }
@media (max-width: 60rem) { .plan { float: none; width: 100%; margin: 1em 0; } }
@media print { body { margin: 0; max-width: none; padding: 0; font-size: 9.5pt; } .sheet { break-before: page; } }
`;

/** CSS string in the page's margins: the code stands on every printed page. */
export function pageStyle(title: string, revision: string): string {
	// A CSS string ends at its quote or at a line break, and a style element at its end tag: neither may come from the title.
	const safe = title.replace(/[^\p{L}\p{N} .,:()·–-]/gu, " ").slice(0, 60);
	return `@page { size: A4 landscape; margin: 15mm 12mm 18mm; @bottom-left { content: "${safe} · revision ${revision}"; font: 8pt sans-serif; } @bottom-right { content: "page " counter(page) " of " counter(pages); font: 8pt sans-serif; } }`;
}
