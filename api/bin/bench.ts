import type { Bench, Measured } from './benches/bench.ts';
import { engineBench } from './benches/engine-bench.ts';
import { growthBench } from './benches/growth-bench.ts';
import { kepertBench } from './benches/kepert-bench.ts';
import { ringBench } from './benches/ring-bench.ts';
import { runBench } from './benches/run-bench.ts';
import { threadsBench } from './benches/threads-bench.ts';

// npm run bench: a line per measurement; npm run bench -- KEY ...: only what gives these numbers;
// npm run -s bench -- --json: one JSON object and nothing else.
const BENCHES: readonly Bench[] = [engineBench, threadsBench, growthBench, kepertBench, ringBench, runBench];

const wanted = process.argv.slice(2).filter((word) => word !== '--json');
const asJson = process.argv.includes('--json');
const known = BENCHES.flatMap(({ keys }) => keys);
const unknown = wanted.filter((key) => !known.includes(key));
if (unknown.length > 0) {
  console.error(`There is no number called ${unknown.join(', ')}. These can be measured: ${known.join(', ')}.`);
  process.exit(2);
}

const measured: Record<string, Measured> = {};
for (const { keys, measure } of BENCHES) {
  if (wanted.length > 0 && !keys.some((key) => wanted.includes(key))) continue;
  const part = await measure((line) => {
    if (!asJson) console.log(line);
  });
  Object.assign(measured, part);
}
if (asJson) console.log(JSON.stringify(measured));
else for (const [name, { value, unit }] of Object.entries(measured)) console.log(`${name}: ${value} ${unit}`);
