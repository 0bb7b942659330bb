import type { Clock } from '../../api/ports/clock.ts';
import type { Mail, MailMessage } from '../../api/ports/mail.ts';

/** Stands still until moved. */
export class FakeClock implements Clock {
  constructor(private at = new Date('2026-12-01T09:00:00Z')) {}

  now(): Date {
    return new Date(this.at);
  }
  pass(milliseconds: number): void {
    this.at = new Date(this.at.getTime() + milliseconds);
  }
}

export class FakeMail implements Mail {
  readonly sent: MailMessage[] = [];
  /** The next sendings fail with this, until it is null again. */
  failure: Error | null = null;

  async send(message: MailMessage): Promise<void> {
    if (this.failure) throw this.failure;
    this.sent.push(message);
  }
}
