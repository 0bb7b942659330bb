import { score as scoreSites } from '../../api/compute/engine.worker.ts';
import type { ScoreTask } from '../../api/compute/protocol.ts';

export { explain, footprint, storm, warm } from '../../api/compute/engine.worker.ts';

/** Takes its thread down when it meets the curve named so; otherwise the product's own. */
export const score = (task: ScoreTask): ReturnType<typeof scoreSites> => {
  if (task.curve.code === 'crash') process.exit(1);
  return scoreSites(task);
};
