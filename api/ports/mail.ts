export interface MailMessage {
  /** Repeated deliveries of one message carry one id. */
  id: string;
  to: string;
  subject: string;
  text: string;
}

export interface Mail {
  send(message: MailMessage): Promise<void>;
}
