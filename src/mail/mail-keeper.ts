import { randomUUID } from "node:crypto";
import { once } from "node:events";
import type { AddressInfo } from "node:net";
import { simpleParser, type AddressObject } from "mailparser";
import { SMTPServer } from "smtp-server";
import { keepMail } from "./kept-mail";

const MAX_BYTES = 1_000_000;

export interface MailKeeper {
  port: number;
  close(): Promise<void>;
}

/** A mail server on loopback that delivers to nobody: it keeps each mail as a file. Port 0 takes a free one. */
export async function startMailKeeper(folder: string, port: number): Promise<MailKeeper> {
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ["STARTTLS", "AUTH"],
    disableReverseLookup: true,
    size: MAX_BYTES,
    onData(stream, _session, done) {
      simpleParser(stream)
        .then((mail) => {
          const receivedAt = new Date().toISOString();
          return keepMail(folder, {
            id: `${receivedAt.replace(/[:.]/g, "-")}-${randomUUID().slice(0, 8)}`,
            receivedAt,
            from: mail.from?.text ?? "",
            to: addressesOf(mail.to),
            subject: mail.subject ?? "",
            text: (mail.text ?? "").trimEnd(),
          });
        })
        .then(() => done(), done);
    },
  });
  // A client that drops its connection is the client's affair.
  server.on("error", () => undefined);
  const listener = server.listen(port, "127.0.0.1");
  await once(listener, "listening");
  return {
    port: (listener.address() as AddressInfo).port,
    close: () => new Promise((resolve) => server.close(resolve)),
  };
}

function addressesOf(to: AddressObject | AddressObject[] | undefined): string {
  return [to ?? []].flat().map((group) => group.text).join(", ");
}
