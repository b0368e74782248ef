"use client";

import { Component, type ReactNode } from "react";
import { Failed } from "@/ui/primitives/states";

/** A map that fails takes nothing else with it: the list beside it goes on. */
export class MapBoundary extends Component<{ children: ReactNode }, { hasFailed: boolean }> {
  override state = { hasFailed: false };

  static getDerivedStateFromError(): { hasFailed: boolean } {
    return { hasFailed: true };
  }

  override render(): ReactNode {
    if (!this.state.hasFailed) return this.props.children;
    return <Failed title="The map could not be drawn." message="The list holds the same figures." onRetry={() => this.setState({ hasFailed: false })} />;
  }
}
