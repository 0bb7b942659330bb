import { fitLaw, passages, runRing, type StudyRing } from '../helpers/ring-study.ts';

// Reruns the sweep behind the amplitude law and prints what it finds, in and out of sample. Takes some minutes.
const POINTS = 128;
const rings = (pairs: readonly (readonly [number, number, number?])[], firstSeed: number): StudyRing[] =>
  pairs.map(([delta, gamma, relaxation], i) => ({
    ...{ delta, gamma, seed: firstSeed + i },
    ...(relaxation !== undefined && { relaxation }),
  }));
const FREE = rings(
  [
    [0.6, 0],
    [0.65, 0],
    [0.7, 0],
    [0.7, 0.2],
    [0.7, 0.4],
    [0.75, 0.2],
    [0.8, 0],
    [0.8, 0.2],
    [0.8, 0.4],
    [0.85, 0],
    [0.85, 0.2],
    [0.85, 0.4],
  ],
  1,
);
const UNSEEN = rings(
  [
    [0.65, 0.2],
    [0.75, 0.5],
    [0.72, 0.1],
    [0.78, 0.3],
  ],
  40,
);
const MAINTAINED = rings(
  [
    [0.78, 0.1, 30],
    [0.68, 0.1, 50],
    [0.72, 0, 40],
    [0.82, 0.3, 25],
  ],
  60,
);

const report = (title: string, list: readonly StudyRing[], regime: number) => {
  const runs = list.map((ring) => runRing(ring, POINTS));
  console.log(title);
  console.table(
    runs.map((run) => {
      const [p50, p90, p99] = passages(run, regime, 7);
      return {
        delta: run.ring.delta,
        gamma: run.ring.gamma,
        relaxation: run.ring.relaxation ?? 'none',
        law: (regime * run.law).toFixed(3),
        run: run.measured.toFixed(3),
        'p50 off': p50!.toFixed(3),
        'p90 off': p90!.toFixed(3),
        'p99 off': p99!.toFixed(3),
      };
    }),
  );
  const { a, rms, r2 } = fitLaw(runs);
  console.log(`a = ${a.toFixed(3)}, rms ${rms.toFixed(3)}, R² ${r2.toFixed(3)}\n`);
};

report('Rings left alone, against 1.10 A1', FREE, 1.1);
report('Rings left alone that no fit has seen', UNSEEN, 1.1);
report('Rings rebuilt by relaxation, against 0.40 A1', MAINTAINED, 0.4);
