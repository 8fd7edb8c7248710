import { chooseAssignments } from "../../src/core/flight/capped.ts";
import { straightLaw } from "../../src/core/flight/law/fleet-law.ts";
import { lawDuration } from "../../src/core/flight/law/time-law.ts";
import { partPairs } from "../../src/core/flight/parting/part-pairs.ts";
import { straightPaths } from "../../src/core/flight/paths/polynomial-paths.ts";
import { smallestSeparation } from "../../src/core/flight/proof/separation.ts";
import { createShow } from "../../src/core/show/index.ts";
import { formationPairs } from "../problems/formation-pairs.ts";
const all: number[] = [], times: number[] = [];
const limits = createShow(1).fleet.limits;
(globalThis as any).TRACE = process.argv[4];
const count = Number(process.argv[2] ?? 200);
for (const { name, from, to } of formationPairs(count, count > 1000 ? 1.05 : 1)) {
	if (process.argv[3] && !name.includes(process.argv[3])) continue;
	const problem: any = { from, to, limits };
	let t = performance.now(); let cpu = process.cpuUsage().user;
	const { candidates, bound } = chooseAssignments(problem);
	if (!process.env.Q) console.log(name, "bound", bound.toFixed(2), "assign", (performance.now() - t).toFixed(0), "ms", candidates.map((c) => `${c.cap}:${(c.longest / bound).toFixed(3)}/${(c.together / bound).toFixed(3)}`).join(" "));
	for (const c of candidates.slice(0,1)) {
		cpu = process.cpuUsage().user;
		const target = c.assignment.target;
		const straight = straightPaths(from, to, target);
		const law = straightLaw(straight, count, limits, "s-curve");
		const T0 = lawDuration(law);
		t = performance.now();
		const r = partPairs({ ...problem, volume: { min: [-600, -600, 0], max: [600, 600, 600] }, blocked: [], timeLaw: "s-curve" }, target, { gap: 1.4998, least: 1.4988, bound, enough: 1.02 * bound, latest: 3 * T0, looks: 300 });
		const ms = performance.now() - t;
		if (!r) { console.log(`   cap ${c.cap} T0 ${(T0 / bound).toFixed(3)} NOT PARTED ${ms.toFixed(0)} ms`); continue; }
		const paths = r.paths;
		const sep = smallestSeparation(paths.coefficients, 3, count, 2).distance;
		all.push(lawDuration(r.law) / bound); times.push((process.cpuUsage().user - cpu) / 1000);
		if (!process.env.Q) console.log(`   cap ${c.cap} T0 ${(T0 / bound).toFixed(3)} real ${(lawDuration(r.law) / bound).toFixed(3)} sep ${sep.toFixed(4)} ${ms.toFixed(0)} ms`);
	}
}

console.log(all.map((x) => x.toFixed(3)).join(" "), "| median", [...all].sort((a, b) => a - b)[all.length >> 1]?.toFixed(3), "ms", [...times].sort((a, b) => a - b)[times.length >> 1]?.toFixed(0), "sum", times.reduce((a, b) => a + b).toFixed(0));
