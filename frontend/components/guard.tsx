import { Component, type ReactNode } from 'react';
import { ErrorState } from './states.tsx';

interface GuardProps {
  /** A part that failed is tried again when this changes. */
  resetKey: unknown;
  children: ReactNode;
}

/** Stands around a part that can fail by itself, so that what is typed beside it stays. */
export class Guard extends Component<GuardProps, { error: unknown; failedAt: unknown }> {
  override state: { error: unknown; failedAt: unknown } = { error: undefined, failedAt: undefined };

  override componentDidCatch(error: unknown): void {
    this.setState({ error, failedAt: this.props.resetKey });
  }

  static getDerivedStateFromError(error: unknown) {
    return { error };
  }

  override render(): ReactNode {
    const { error, failedAt } = this.state;
    const failed = error !== undefined && (failedAt === undefined || failedAt === this.props.resetKey);
    return failed ? <ErrorState error={error} /> : this.props.children;
  }
}
