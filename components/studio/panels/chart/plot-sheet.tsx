'use client'

import { useSyncExternalStore, type ReactNode } from 'react'
import { lookWithoutPage, onPageLook, pageLook } from '@/components/plot/page-look'
import type { Scene } from '@/components/plot/scene'
import { StaticLayer } from '../../stack/static-layer'

/** A scene on the page, and above it what moves: children are placed in the scene's own pixels. */
export function PlotSheet({ scene, children }: { scene: Scene; children?: ReactNode }) {
  const look = useSyncExternalStore(onPageLook, pageLook, () => lookWithoutPage)
  return (
    <div className="relative" style={{ width: scene.width, height: scene.height }}>
      <StaticLayer scene={scene} look={look} />
      {children}
    </div>
  )
}
