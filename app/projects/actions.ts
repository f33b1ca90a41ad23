'use server'

import { findDesign, insertDesign } from '@/db/queries/designs'
import { findProject, insertProject } from '@/db/queries/projects'
import { findTeam } from '@/db/queries/teams'
import { findVersion } from '@/db/queries/versions'
import { teamAction } from '@/lib/actions/action'
import { AppError, notFound } from '@/lib/errors'
import { defaultSpec } from '@/lib/designs/edits'
import { createDesignSchema, createProjectSchema, duplicateDesignSchema } from '@/lib/designs/schemas'

export const createProject = teamAction('project.create', {
  schema: createProjectSchema,
  what: 'team',
  find: (access, input, tx) => findTeam(access, input.teamId, tx),
  run: async ({ input, found, access, tx }) => {
    const project = await insertProject(tx, access, input)
    if (project === null) throw notFound('team')
    if (project === 'taken')
      throw new AppError('name-taken', `This team has a project ${input.code} already; choose another code.`, {
        field: 'code',
      })
    const trail = { team: found.id, object: `project:${project.id}`, details: { code: input.code } }
    return { value: { projectId: project.id }, trail }
  },
})

export const createDesign = teamAction('design.create', {
  schema: createDesignSchema,
  what: 'project',
  find: (access, input, tx) => findProject(access, input.projectId, tx),
  run: async ({ input, found, access, tx }) => {
    const design = await insertDesign(tx, access, { ...input, spec: defaultSpec })
    if (!design) throw notFound('project')
    const details = { drawingNumber: design.drawingNumber }
    return { value: { designId: design.id }, trail: { team: found.teamId, object: `design:${design.id}`, details } }
  },
})

/** A new design of the same project that starts where this one's latest version stands. */
export const duplicateDesign = teamAction('design.duplicate', {
  schema: duplicateDesignSchema,
  what: 'design',
  find: (access, input, tx) => findDesign(access, input.designId, tx),
  run: async ({ found, access, tx }) => {
    const latest = await findVersion(access, found.id, 'latest', tx)
    const title = `Copy of ${found.title}`.slice(0, 120)
    const copy = await insertDesign(tx, access, {
      projectId: found.projectId,
      title,
      spec: latest?.spec ?? found.startingSpec,
    })
    if (!copy) throw notFound('design')
    const details = { drawingNumber: copy.drawingNumber, from: found.drawingNumber }
    return { value: { designId: copy.id }, trail: { team: found.teamId, object: `design:${copy.id}`, details } }
  },
})
