"use client";

import { screenQueryToParams } from "@/domain/query-address";
import type { ScreenQuery } from "@/domain/screen";
import { Button, ButtonLink } from "@/ui/primitives/button";
import { Input } from "@/ui/primitives/field";
import { useCan } from "@/ui/shell/city";
import { PublishControl } from "./publish-control";
import type { PublishAction } from "./screen-view";

export function ScreenTools(props: {
  query: ScreenQuery;
  onChange: (part: Partial<ScreenQuery>) => void;
  publish: PublishAction;
  isMapOpen: boolean;
  onToggleMap: () => void;
  shown: number;
}) {
  const { query, onChange, publish } = props;
  const canExport = useCan("screen.export");
  const canPublish = useCan("hotspots.publish");
  const params = screenQueryToParams(query).toString();
  return (
    <div className="flex flex-wrap items-center gap-2 border-b border-rule px-2.5 py-1.5">
      <Input
        type="search"
        aria-label="Find a junction by name"
        placeholder="Find a junction"
        maxLength={80}
        value={query.q}
        onChange={(event) => onChange({ q: event.target.value })}
        className="w-auto min-w-40 flex-1 font-table"
      />
      <Button className="lg:hidden" aria-pressed={props.isMapOpen} onClick={props.onToggleMap}>
        {props.isMapOpen ? "Hide the map" : "Show the map"}
      </Button>
      {canExport ? (
        <ButtonLink href={`/api/screen/export${params ? `?${params}` : ""}`} download>
          Export CSV
        </ButtonLink>
      ) : null}
      {canPublish ? <PublishControl query={query} publish={publish} shown={props.shown} /> : null}
    </div>
  );
}
