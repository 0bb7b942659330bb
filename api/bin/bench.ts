import { engineBench } from './benches/engine-bench.ts';
import { runBench } from './benches/run-bench.ts';
import type { Bench, Measured } from './benches/bench.ts';

// npm run bench: a line per measurement; npm run -s bench -- --json: one JSON object and nothing else.
const BENCHES: readonly Bench[] = [engineBench, runBench];

const asJson = process.argv.includes('--json');
const measured: Record<string, Measured> = {};
for (const bench of BENCHES) {
  const part = await bench((line) => {
    if (!asJson) console.log(line);
  });
  Object.assign(measured, part);
}
if (asJson) console.log(JSON.stringify(measured));
else for (const [name, { value, unit }] of Object.entries(measured)) console.log(`${name}: ${value} ${unit}`);
