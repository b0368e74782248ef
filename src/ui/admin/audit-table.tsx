import type { AuditView } from "@/domain/people";
import { formatInstant } from "@/ui/format";
import { RuledTable, Td, Th } from "@/ui/primitives/table";

export function AuditTable({ events, locale, timeZone }: { events: AuditView[]; locale: string; timeZone: string }) {
  return (
    <RuledTable caption="What was done, by whom and when" className="min-w-[44rem]">
      <thead>
        <tr>
          <Th>when</Th>
          <Th>who</Th>
          <Th>did</Th>
          <Th>to what</Th>
          <Th>detail</Th>
        </tr>
      </thead>
      <tbody>
        {events.map((event) => (
          <tr key={event.id}>
            <Td className="whitespace-nowrap">
              <time dateTime={event.at}>{formatInstant(event.at, locale, timeZone)}</time>
            </Td>
            <Td className="min-w-48 break-words">{event.actor}</Td>
            <Td>{event.action}</Td>
            <Td className="break-words">{event.subject}</Td>
            <Td className="text-ink-soft">{detailText(event.detail)}</Td>
          </tr>
        ))}
      </tbody>
    </RuledTable>
  );
}

/** "from reader, to engineer"; of a changed group of settings only what differs. */
export function detailText(detail: Record<string, unknown>): string {
  const { before, after, ...plain } = detail;
  const changes = isRecord(before) && isRecord(after) ? changesBetween(before, after) : [];
  return [...Object.entries(plain).map(([key, value]) => `${key} ${valueText(value)}`), ...changes].join(", ");
}

function changesBetween(before: Record<string, unknown>, after: Record<string, unknown>): string[] {
  return Object.keys(after)
    .filter((key) => valueText(before[key]) !== valueText(after[key]))
    .map((key) => `${key} from ${valueText(before[key])} to ${valueText(after[key])}`);
}

function valueText(value: unknown): string {
  return typeof value === "string" ? value : JSON.stringify(value);
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === "object" && value !== null;
}
