import type { Role } from "@/domain/actor";
import type { PasswordMailPurpose } from "./send-password-mail";

export interface PasswordMailFacts {
  name: string;
  role: Role;
  cityName: string;
  purpose: PasswordMailPurpose;
  link: string;
  validHours: number;
}

export function passwordMail(facts: PasswordMailFacts): { subject: string; text: string } {
  const validity = facts.validHours >= 48 ? `${facts.validHours / 24} days` : facts.validHours === 1 ? "one hour" : `${facts.validHours} hours`;
  const [subject, reason, ifUnexpected] =
    facts.purpose === "invitation"
      ? [
          `Your account for Tailmark in ${facts.cityName}`,
          `You have been given an account as ${facts.role}. Choose a password to begin:`,
          "If you did not expect this, do nothing: the account stays closed.",
        ]
      : [
          `Set a new password for Tailmark in ${facts.cityName}`,
          "Someone, probably you, asked for a new password. Choose it here:",
          "If it was not you, do nothing: your password stays as it is.",
        ];
  const text = [`Good day ${facts.name},`, reason, facts.link, `The link works once, within ${validity}.`, ifUnexpected].join("\n\n");
  return { subject, text };
}
