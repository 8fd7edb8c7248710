/**
 * The planner on the problem suite: npm run bench:flight [-- N …]. By problem and N: method, duration over the straight-
 * line bound, seconds to plan and to prove (also as ratios to a fixed calibration loop), conflicts left; and assignment
 * beside npm linear-sum-assignment and, where it is installed, scipy.
 */
import { spawnSync } from "node:child_process";
import { mkdirSync, writeFileSync } from "node:fs";
import { linearSumAssignment } from "linear-sum-assignment";
import { assign } from "../../src/core/flight/assign/assign.ts";
import { type LegProblem, planLeg, provePlan, withKey } from "../../src/core/flight/index.ts";
import { scaledMillimetres } from "../../src/core/flight/measure.ts";
import { createShow } from "../../src/core/show/index.ts";
import { formationPairs } from "../problems/formation-pairs.ts";

const sizes = process.argv.slice(2).map(Number).filter(Boolean);
const limits = createShow(1).fleet.limits;
const median = (values: number[]): number => [...values].sort((a, b) => a - b)[values.length >> 1];
const at = (values: number[], share: number): number =>
	[...values].sort((a, b) => a - b)[Math.min(values.length - 1, Math.floor(share * values.length))];

/** Seconds of a fixed loop of float64 work: what figures of different machines and hours are compared by. */
function calibrate(): number {
	const start = performance.now();
	let x = 0.5;
	for (let i = 0; i < 4e7; i++) x = 3.7 * x * (1 - x);
	if (!(x > 0)) throw new Error("the logistic map left its interval");
	return (performance.now() - start) / 1000;
}

const calibration = median([1, 2, 3, 4, 5].map(calibrate));
const rows: Record<string, unknown>[] = [];
for (const count of sizes.length > 0 ? sizes : [200, 500, 1000]) {
	const [ratios, plans, proofs] = [[] as number[], [] as number[], [] as number[]];
	let conflicts = 0;
	for (const { name, from, to } of formationPairs(count, count > 1000 ? 1.05 : 1)) {
		const problem: LegProblem = withKey({
			id: name,
			kind: "transition",
			fromFormation: "a",
			toFormation: "b",
			from,
			to,
			target: null,
			delays: null,
			limits,
			// The pairs are about one another: the largest reach below the ground and far out.
			volume: { min: [-5000, -5000, -5000], max: [5000, 5000, 5000] },
			blocked: [],
			timeLaw: "s-curve",
			available: null,
		});
		let start = performance.now();
		const plan = planLeg(problem);
		const planning = (performance.now() - start) / 1000;
		start = performance.now();
		const proof = provePlan(plan, problem, plan.shortest);
		const proving = (performance.now() - start) / 1000;
		const flies = proof.verdicts.includes("flies");
		if (!flies) conflicts++;
		const ratio = plan.straightLineBound > 0 ? plan.shortest / plan.straightLineBound : 1;
		ratios.push(ratio);
		plans.push(planning);
		proofs.push(proving);
		rows.push({
			count,
			name,
			method: plan.method,
			cap: plan.certificate.cap,
			ratio,
			planning,
			proving,
			gap: proof.gap?.distance,
			verdicts: proof.verdicts,
		});
		console.log(
			`${String(count).padStart(5)}  ${name.padEnd(34)} ${plan.method.padEnd(10)} ${ratio.toFixed(3)} of the bound  plan ${planning.toFixed(2)} s  prove ${proving.toFixed(2)} s  ${proof.verdicts.join(" ")}`,
		);
	}
	console.log(
		`${String(count).padStart(5)}  not flying ${conflicts} of ${ratios.length}; over the bound: median ${median(ratios).toFixed(3)}, 90 % ${at(ratios, 0.9).toFixed(3)}, worst ${Math.max(...ratios).toFixed(3)}; ` +
			`plan and prove: median ${(median(plans) + median(proofs)).toFixed(2)} s = ${((median(plans) + median(proofs)) / calibration).toFixed(2)} calibration loops; memory ${(process.memoryUsage().rss / 1e6).toFixed(0)} MB`,
	);
	rows.push({ count, conflicts, median: median(ratios), ninety: at(ratios, 0.9), worst: Math.max(...ratios) });
	rows.push({ count, ...compareAssignment(count) });
}
mkdirSync("bench-results", { recursive: true });
writeFileSync(
	"bench-results/flight.json",
	JSON.stringify({ date: new Date().toISOString(), calibration, rows }, null, "\t"),
);

/** Median seconds of five exact assignments, ours and the others', on the same pair. */
function compareAssignment(count: number): Record<string, number | null> {
	const pair = formationPairs(count)[5];
	const [from, to] = [scaledMillimetres(pair.from, limits.downwash), scaledMillimetres(pair.to, limits.downwash)];
	const timed = (work: () => unknown, times: number): number =>
		median(
			Array.from({ length: times }, () => {
				const start = performance.now();
				work();
				return (performance.now() - start) / 1000;
			}),
		);
	const ours = timed(() => assign(from, to), 5);
	const square = (i: number, j: number): number =>
		(from[3 * i] - to[3 * j]) ** 2 + (from[3 * i + 1] - to[3 * j + 1]) ** 2 + (from[3 * i + 2] - to[3 * j + 2]) ** 2;
	const npm =
		count > 1000
			? null
			: timed(
					() =>
						linearSumAssignment(
							Array.from({ length: count }, (_, i) => Array.from({ length: count }, (_, j) => square(i, j))),
							{ maximaze: false },
						),
					count > 500 ? 1 : 3,
				);
	const python = `
import json,sys,time,numpy as np
from scipy.optimize import linear_sum_assignment as lsa
d=json.load(sys.stdin); a=np.array(d[0]).reshape(-1,3); b=np.array(d[1]).reshape(-1,3)
c=((a[:,None]-b[None])**2).sum(2); t=[]
for _ in range(${count > 1000 ? 1 : 5}):
  s=time.perf_counter(); lsa(c); t.append(time.perf_counter()-s)
print(sorted(t)[len(t)//2])`;
	// Its matrix of costs alone takes 800 MB at 10 000.
	const run =
		count > 5000
			? null
			: spawnSync("/usr/bin/python3", ["-c", python], {
					input: JSON.stringify([[...from], [...to]]),
					encoding: "utf8",
				});
	const scipy = run?.status === 0 ? Number(run.stdout) : null;
	console.log(
		`${String(count).padStart(5)}  assignment ${ours.toFixed(4)} s; npm linear-sum-assignment ${npm === null ? "not run" : `${(npm / ours).toFixed(1)} times that`}; scipy ${scipy === null ? "not there" : `${scipy.toFixed(4)} s`}`,
	);
	return { ours, npm, scipy };
}
