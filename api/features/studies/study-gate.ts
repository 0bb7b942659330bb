import { AppError } from '../../errors.ts';

/** Work of one kind, so many at a time; a few wait, the rest are asked to come again. */
export class StudyGate {
  private running = 0;
  private readonly waiting: (() => void)[] = [];

  constructor(
    private readonly atOnce: number,
    private readonly mostWaiting: number,
    private readonly retryAfterS: number,
  ) {}

  async pass<T>(signal: AbortSignal, work: () => Promise<T>): Promise<T> {
    if (this.running >= this.atOnce) await this.wait(signal);
    else this.running += 1;
    try {
      signal.throwIfAborted();
      return await work();
    } finally {
      const next = this.waiting.shift();
      if (next) next();
      else this.running -= 1;
    }
  }

  /** Until whoever is done hands its place over. */
  private wait(signal: AbortSignal): Promise<void> {
    if (this.waiting.length >= this.mostWaiting) {
      throw new AppError('unavailable', 'Several studies are being computed. Try again in a moment.', {
        retryAfterS: this.retryAfterS,
      });
    }
    return new Promise((resolve, reject) => {
      const turn = () => {
        signal.removeEventListener('abort', leave);
        resolve();
      };
      const leave = () => {
        this.waiting.splice(this.waiting.indexOf(turn), 1);
        reject(signal.reason as Error);
      };
      signal.addEventListener('abort', leave, { once: true });
      this.waiting.push(turn);
    });
  }
}
