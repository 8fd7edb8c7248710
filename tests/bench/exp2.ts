import { chooseAssignments } from "../../src/core/flight/capped.ts";
import { straightLaw, lawForPaths } from "../../src/core/flight/law/fleet-law.ts";
import { lawDuration } from "../../src/core/flight/law/time-law.ts";
import { straightBends, bentPaths } from "../../src/core/flight/parting/bends.ts";
import { createPace } from "../../src/core/flight/parting/haste.ts";
import { straightPaths } from "../../src/core/flight/paths/polynomial-paths.ts";
import { createShow } from "../../src/core/show/index.ts";
import { formationPairs } from "../problems/formation-pairs.ts";
const limits = createShow(1).fleet.limits;
const count = 200;
for (const { name, from, to } of formationPairs(count, 1)) {
	const { candidates, bound } = chooseAssignments({ from, to, limits } as any);
	const c = candidates[0];
	const target = c.assignment.target;
	let law = straightLaw(straightPaths(from, to, target), count, limits, "s-curve");
	const T0 = lawDuration(law) / bound;
	const bends = straightBends(from, to, target, 2);
	const out: string[] = [];
	for (let rep = 0; rep < 4; rep++) {
		const pace = createPace(law, limits, 2);
		let worst = 0;
		for (let i = 0; i < count; i++) {
			for (let k = 0; k < 30; k++) pace.yieldTo(bends, i, 1.005 * bound);
			worst = Math.max(worst, pace.haste(bends, i, bound));
		}
		law = lawForPaths(bentPaths(from, to, target, bends, 2), count, limits, "s-curve");
		out.push(worst.toFixed(3), (lawDuration(law) / bound).toFixed(3));
	}
	console.log(name.padEnd(30), "longest", (c.longest / bound).toFixed(3), "T0", T0.toFixed(3), "paced/fitted", out.join(" "));
}
