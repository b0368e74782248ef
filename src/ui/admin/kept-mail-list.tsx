import type { KeptMailView } from "@/domain/people";
import { formatInstant } from "@/ui/format";

/** Web addresses in a mail become links; the rest stays as it came. */
function MailText({ text }: { text: string }) {
  return (
    <p className="max-w-prose whitespace-pre-wrap break-words">
      {text.split(/(https?:\/\/[^\s]+)/).map((part, at) =>
        at % 2 === 1 ? (
          <a key={at} href={part} className="text-link break-all">
            {part}
          </a>
        ) : (
          part
        ),
      )}
    </p>
  );
}

export function KeptMailList({ mails, locale, timeZone }: { mails: KeptMailView[]; locale: string; timeZone: string }) {
  return (
    <ul className="border-t border-ink">
      {mails.map((mail) => (
        <li key={mail.id} className="border-b border-rule">
          <details>
            <summary className="grid cursor-pointer gap-x-6 gap-y-1 py-2.5 sm:grid-cols-[11rem_minmax(0,18rem)_1fr]">
              <time dateTime={mail.receivedAt} className="tabular text-ink-soft">
                {formatInstant(mail.receivedAt, locale, timeZone)}
              </time>
              <span className="truncate">{mail.to}</span>
              <span className="font-semibold">{mail.subject}</span>
            </summary>
            <div className="pb-5 sm:pl-[12.5rem]">
              <MailText text={mail.text} />
            </div>
          </details>
        </li>
      ))}
    </ul>
  );
}
