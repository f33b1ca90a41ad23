'use client'

import { Component, type ReactNode } from 'react'
import { Button } from './button'

interface FenceProps {
  /** What stands inside, in the words of the sentence shown when it fails. */
  readonly what: string
  readonly children: ReactNode
  /** When this changes, what failed is tried again. */
  readonly retryOn?: unknown
}

/** Keeps a fault where it happens: one plot or panel gives way to a sentence, and the rest of the sheet stays usable. */
export class Fence extends Component<FenceProps, { readonly failed: boolean; readonly retryOn: unknown }> {
  override state = { failed: false, retryOn: this.props.retryOn }

  static getDerivedStateFromError() {
    return { failed: true }
  }

  static getDerivedStateFromProps(props: FenceProps, state: { failed: boolean; retryOn: unknown }) {
    return Object.is(props.retryOn, state.retryOn) ? null : { failed: false, retryOn: props.retryOn }
  }

  override render() {
    if (!this.state.failed) return this.props.children
    return (
      <div role="alert" className="border-l-2 border-vermilion py-2 pl-3 text-[14px]">
        <p>{this.props.what} can’t be shown with these values. The statement and everything saved are untouched.</p>
        <Button small className="mt-2" onClick={() => this.setState({ failed: false })}>
          Try again
        </Button>
      </div>
    )
  }
}
