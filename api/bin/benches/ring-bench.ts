import { spawnSync } from 'node:child_process';
import { stableStep, stepFlow } from '#engine/ring/barotropic.ts';
import { DEFAULT_BREAKDOWN, ringFlow } from '#engine/ring/breakdown.ts';
import { cpuSeconds, median, rounded, type Bench, type Measured } from './bench.ts';

const SIZES = [128, 256] as const;
const PAIRS = 5;
const STEPS = 40;
const WIND = 62;

/** Prints the processor time of one complex two-dimensional transform [s], as NumPy does it on one thread. */
const NUMPY = (points: number) => `
import time, numpy
field = numpy.random.rand(${points}, ${points}) + 1j * numpy.random.rand(${points}, ${points})
numpy.fft.fft2(field)
start = time.process_time()
for _ in range(${8 * STEPS}): numpy.fft.fft2(field)
print((time.process_time() - start) / ${8 * STEPS})
`;

const transformS = (points: number): number | null => {
  const env = { ...process.env, OMP_NUM_THREADS: '1', OPENBLAS_NUM_THREADS: '1' };
  const { status, stdout } = spawnSync('python3', ['-c', NUMPY(points)], { encoding: 'utf8', env });
  return status === 0 ? Number(stdout) : null;
};

/** The control ring of Schubert et al. (1999), constants from memory. */
const CONTROL = { maxWind: 60.37, radiusOfMaxWind: 57_500, widthFraction: 0.34783, eyeRatio: 0.19918 };
const flowOf = (points: number) => ringFlow({ ...DEFAULT_BREAKDOWN, ...CONTROL, points });

const stepS = (points: number): number => {
  const flow = flowOf(points);
  const step = stableStep(flow, WIND);
  stepFlow(flow, step);
  const start = cpuSeconds();
  for (let k = 0; k < STEPS; k++) stepFlow(flow, step);
  return (cpuSeconds() - start) / STEPS;
};

/** One step of the ring's breakdown beside eight transforms by NumPy, where python3-numpy is installed; and a whole day. */
export const ringBench: Bench = {
  keys: ['ringStepVsNumpy128', 'ringStepVsNumpy256', 'ringDay128'],
  measure(say) {
    const measured: Record<string, Measured> = {};
    stepS(128);
    for (const points of SIZES) {
      const ratios: number[] = [];
      for (let pair = 0; pair < PAIRS; pair++) {
        const [step, transform] = [stepS(points), transformS(points)];
        if (transform === null) break;
        say(`${points}²: a step ${(1e3 * step).toFixed(2)} ms, a NumPy transform ${(1e3 * transform).toFixed(2)} ms`);
        ratios.push(step / (8 * transform));
      }
      if (ratios.length === 0) say('python3-numpy isn’t installed: steps aren’t compared with its transforms');
      else
        measured[`ringStepVsNumpy${points}`] = {
          value: rounded(median(ratios)),
          unit: 'step over eight transforms, processor times',
        };
    }
    const flow = flowOf(128);
    const steps = Math.ceil(86_400 / stableStep(flow, WIND));
    const start = cpuSeconds();
    for (let k = 0; k < steps; k++) stepFlow(flow, 86_400 / steps);
    measured.ringDay128 = { value: rounded(cpuSeconds() - start), unit: `s of processor time, ${steps} steps` };
    return Promise.resolve(measured);
  },
};
