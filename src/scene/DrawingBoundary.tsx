import { Component, type ReactNode } from 'react';

/** A browser that cannot draw keeps its numbers and its Stop. */
export class DrawingBoundary extends Component<{ children: ReactNode }, { failed: boolean }> {
  override state = { failed: false };

  static getDerivedStateFromError() {
    return { failed: true };
  }

  override render() {
    if (!this.state.failed) return this.props.children;
    return (
      <p className="stage-note" role="status">
        <b>No picture here.</b>
        <br />
        This browser cannot draw in three dimensions. The numbers are right.
      </p>
    );
  }
}
