import { sql } from 'drizzle-orm'
import {
  check,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  timestamp,
  unique,
  uuid,
} from 'drizzle-orm/pg-core'
import type { DesignSpec } from '@/dsp'
import type { StoredCoefficients } from '@/lib/designs/coefficients'
import { accounts } from './accounts'
import { projects } from './projects'

export const designs = pgTable(
  'designs',
  {
    id: uuid().primaryKey().defaultRandom(),
    projectId: uuid('project_id')
      .notNull()
      .references(() => projects.id, { onDelete: 'restrict' }),
    serial: integer().notNull(),
    /** Given once and kept, even when the response or the project's code changes: it stands on drawings that were handed out. */
    drawingNumber: text('drawing_number').notNull(),
    title: text().notNull(),
    /** What the design was opened with: everybody sees this until a first version is saved. */
    startingSpec: jsonb('starting_spec').$type<DesignSpec>().notNull(),
    createdBy: uuid('created_by')
      .notNull()
      .references(() => accounts.id, { onDelete: 'restrict' }),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    unique('designs_project_serial_key').on(table.projectId, table.serial),
    unique('designs_project_drawing_number_key').on(table.projectId, table.drawingNumber),
    check('designs_title_length', sql`length(${table.title}) between 1 and 120`),
  ],
)

/**
 * What was saved on purpose. Rows are only ever added: a trigger (drizzle/…_immutable) refuses every UPDATE, DELETE and TRUNCATE,
 * and lets a number in only when it is the next one.
 */
export const versions = pgTable(
  'versions',
  {
    id: uuid().primaryKey().defaultRandom(),
    designId: uuid('design_id')
      .notNull()
      .references(() => designs.id, { onDelete: 'restrict' }),
    number: integer().notNull(),
    parentNumber: integer('parent_number'),
    note: text().notNull(),
    spec: jsonb().$type<DesignSpec>().notNull(),
    coefficients: jsonb().$type<StoredCoefficients>().notNull(),
    /** SHA-256 of the canonical coefficients, hex. */
    checksum: text().notNull(),
    engineVersion: text('engine_version').notNull(),
    savedBy: uuid('saved_by')
      .notNull()
      .references(() => accounts.id, { onDelete: 'restrict' }),
    savedAt: timestamp('saved_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    // Two savers who both counted to the same number: the second fails instead of replacing the first.
    unique('versions_design_number_key').on(table.designId, table.number),
    foreignKey({
      name: 'versions_parent_fk',
      columns: [table.designId, table.parentNumber],
      foreignColumns: [table.designId, table.number],
    }),
    check('versions_number_counts', sql`${table.number} >= 1`),
    check('versions_parent_earlier', sql`${table.parentNumber} is null or ${table.parentNumber} < ${table.number}`),
    check('versions_note_length', sql`length(${table.note}) between 1 and 500`),
    check('versions_checksum_form', sql`${table.checksum} ~ '^[0-9a-f]{64}$'`),
  ],
)

/** One autosaved draft for each editor of a design. */
export const drafts = pgTable(
  'drafts',
  {
    designId: uuid('design_id')
      .notNull()
      .references(() => designs.id, { onDelete: 'cascade' }),
    accountId: uuid('account_id')
      .notNull()
      .references(() => accounts.id, { onDelete: 'cascade' }),
    spec: jsonb().$type<DesignSpec>().notNull(),
    parentNumber: integer('parent_number'),
    /** Counts autosaves; a save that names another count than this one is refused, so that two open pages can't undo each other. */
    revision: integer().notNull(),
    updatedAt: timestamp('updated_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    primaryKey({ columns: [table.designId, table.accountId] }),
    index('drafts_account_id_index').on(table.accountId),
    foreignKey({
      name: 'drafts_parent_fk',
      columns: [table.designId, table.parentNumber],
      foreignColumns: [versions.designId, versions.number],
    }),
    check('drafts_revision_counts', sql`${table.revision} >= 1`),
    // The route refuses larger bodies; this stops whatever comes another way.
    check('drafts_spec_size', sql`pg_column_size(${table.spec}) <= 262144`),
  ],
)
