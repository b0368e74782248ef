import { createTransport } from "nodemailer";
import { listKeptMail, type KeptMail } from "./kept-mail";

export interface OutgoingMail {
  to: string;
  subject: string;
  /** Plain text; lines are wrapped by the reader. */
  text: string;
}

export interface Mailer {
  /** Throws where the server does not take the mail; the caller's job tries again. */
  send(mail: OutgoingMail): Promise<void>;
  /** Mail that a local stand-in kept, newest first; null where mail really goes out. */
  listKept(limit: number): Promise<KeptMail[] | null>;
  close(): void;
}

export interface MailerOptions {
  smtpUrl: string;
  from: string;
  /** Folder of the local stand-in; null with a real mail server. */
  keptFolder: string | null;
}

const TIMEOUT_MS = 10_000;

export function openMailer({ smtpUrl, from, keptFolder }: MailerOptions): Mailer {
  const transport = createTransport({
    url: smtpUrl,
    connectionTimeout: TIMEOUT_MS,
    greetingTimeout: TIMEOUT_MS,
    socketTimeout: TIMEOUT_MS,
  });
  return {
    async send(mail) {
      // Addresses come from people: nothing in a mail may make the server read a file or a URL.
      await transport.sendMail({ from, ...mail, disableFileAccess: true, disableUrlAccess: true });
    },
    listKept: async (limit) => (keptFolder === null ? null : listKeptMail(keptFolder, limit)),
    close: () => transport.close(),
  };
}
