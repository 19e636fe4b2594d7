"use client";

import { Component, type ReactNode } from "react";
import { Button } from "@/app/_ui/Button";

/** Keeps a fault of one view to its block: the rest of the page goes on, and the data are untouched. */
export class BlockBoundary extends Component<{ readonly children: ReactNode }, { readonly failed: string | null }> {
  override state = { failed: null };

  static getDerivedStateFromError(error: unknown) {
    return { failed: error instanceof Error ? error.message : String(error) };
  }

  override render() {
    if (this.state.failed === null) return this.props.children;
    return (
      <p className="py-2 text-vermilion" role="alert">
        This block could not be drawn ({this.state.failed}). Nothing of it is lost.{" "}
        <Button onClick={() => this.setState({ failed: null })}>Draw it again</Button>
      </p>
    );
  }
}
