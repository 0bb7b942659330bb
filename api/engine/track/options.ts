import { DomainError } from '../errors.ts';

/** Choices of the chain that the person running it may make. */
export type ChainOptions = {
  /** Whether a reported wind or the central pressure sets the intensity where both are given. */
  readonly intensity: 'pressure' | 'wind';
  /** Whether the maximum wind already holds vortex peaks: at wind fixes (auto), never (mean), always (peak). */
  readonly anchor: 'auto' | 'mean' | 'peak';
  readonly mesovortices: boolean;
  /** Step of the outer time grid [s]. */
  readonly timeStepS: number;
  /** Step near the centre [s]; not smaller than the outer step = no refinement. */
  readonly innerTimeStepS: number;
};

/** What holds where nothing is chosen. */
export const DEFAULT_OPTIONS: ChainOptions = {
  intensity: 'pressure',
  anchor: 'auto',
  mesovortices: true,
  timeStepS: 300,
  innerTimeStepS: 60,
};

/**
 * Refuses steps that make no sense.
 *
 * @param options The options; steps [s].
 * @throws {DomainError} when a step is not in 5..3600 s.
 * @source Rule of this product.
 */
export function requireOptions({ timeStepS, innerTimeStepS }: ChainOptions): void {
  if (!(timeStepS >= 5 && timeStepS <= 3600)) throw new DomainError('timeStepS', timeStepS, 'in 5..3600 s');
  if (!(innerTimeStepS >= 5 && innerTimeStepS <= 3600)) {
    throw new DomainError('innerTimeStepS', innerTimeStepS, 'in 5..3600 s');
  }
}
