import { createTransport, type Transporter } from 'nodemailer';
import type { Mail, MailMessage } from '../../ports/mail.ts';

const GIVE_UP_MS = 20_000;

/** Mail over SMTP: the provider's server in production, the local sink elsewhere. */
export class SmtpMail implements Mail {
  private readonly transport: Transporter;

  constructor(
    smtpUrl: string,
    private readonly from: string,
  ) {
    this.transport = createTransport(smtpUrl, { from });
  }

  async send(message: MailMessage): Promise<void> {
    const late = AbortSignal.timeout(GIVE_UP_MS);
    await Promise.race([
      this.transport.sendMail({
        from: this.from,
        to: message.to,
        subject: message.subject,
        text: message.text,
        textEncoding: 'base64',
        messageId: `<${message.id}@gustloom>`,
      }),
      new Promise((_, reject) => {
        late.addEventListener('abort', () => reject(new Error('The mail server didn’t answer in time')), {
          once: true,
        });
      }),
    ]);
  }
}
