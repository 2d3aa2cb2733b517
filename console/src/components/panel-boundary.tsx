import { Component, type ReactNode } from 'react';
import Button from '@mui/material/Button';
import { Notice } from './notice.js';

interface PanelBoundaryProps {
  name: string;
  children: ReactNode;
}

/** Keeps a fault of the console inside the panel where it happened, so that the rest can still be used. */
export class PanelBoundary extends Component<PanelBoundaryProps, { isBroken: boolean }> {
  override state = { isBroken: false };

  static getDerivedStateFromError() {
    return { isBroken: true };
  }

  override render() {
    if (!this.state.isBroken) return this.props.children;
    return (
      <Notice
        kind="warn"
        role="alert"
        title={`"${this.props.name}" cannot be shown`}
        actions={<Button onClick={() => this.setState({ isBroken: false })}>Show again</Button>}
      >
        The console met a fault of its own here. The rig is not affected.
      </Notice>
    );
  }
}
