"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useEffect, useRef } from "react";

/** Has every figure read afresh once the server has done what it was about: what was fetched before may be old. */
export function useFreshFigures(isUnderWay: boolean): void {
  const client = useQueryClient();
  const wasUnderWay = useRef(isUnderWay);
  useEffect(() => {
    if (wasUnderWay.current && !isUnderWay) void client.invalidateQueries();
    wasUnderWay.current = isUnderWay;
  }, [isUnderWay, client]);
}
