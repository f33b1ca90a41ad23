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
import type { ChainSpec } from '@/dsp'
import type { StoredChainNumbers } from '@/lib/chains/stored-numbers'
import type { ChainFigures } from '@/lib/chains/types'
import { accounts } from './accounts'
import { versions } from './designs'
import { projects } from './projects'

export const chains = pgTable(
  'chains',
  {
    id: uuid().primaryKey().defaultRandom(),
    projectId: uuid('project_id')
      .notNull()
      .references(() => projects.id, { onDelete: 'restrict' }),
    /** From the same count as the project's designs, so that no two sheets of a project share a number. */
    serial: integer().notNull(),
    /** Given once and kept; a trigger holds it. */
    drawingNumber: text('drawing_number').notNull(),
    title: text().notNull(),
    /** What the chain was opened with: everybody sees this until a first version is saved. */
    startingSpec: jsonb('starting_spec').$type<ChainSpec>().notNull(),
    createdBy: uuid('created_by')
      .notNull()
      .references(() => accounts.id, { onDelete: 'restrict' }),
    createdAt: timestamp('created_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    unique('chains_project_serial_key').on(table.projectId, table.serial),
    unique('chains_project_drawing_number_key').on(table.projectId, table.drawingNumber),
    check('chains_title_length', sql`length(${table.title}) between 1 and 120`),
  ],
)

/**
 * What was saved on purpose. Rows are only ever added: a trigger (drizzle/…_chains_immutable) refuses every UPDATE, DELETE and TRUNCATE,
 * and lets a number in only when it is the next one.
 */
export const chainVersions = pgTable(
  'chain_versions',
  {
    id: uuid().primaryKey().defaultRandom(),
    chainId: uuid('chain_id')
      .notNull()
      .references(() => chains.id, { onDelete: 'restrict' }),
    number: integer().notNull(),
    parentNumber: integer('parent_number'),
    note: text().notNull(),
    spec: jsonb().$type<ChainSpec>().notNull(),
    figures: jsonb().$type<ChainFigures>().notNull(),
    /** What the digital stages come to; what is handed over are these, never a recomputation. */
    numbers: jsonb().$type<StoredChainNumbers>().notNull(),
    /** SHA-256 of the canonical spec, figures and numbers, hex. */
    checksum: text().notNull(),
    engineVersion: text('engine_version').notNull(),
    savedBy: uuid('saved_by')
      .notNull()
      .references(() => accounts.id, { onDelete: 'restrict' }),
    savedAt: timestamp('saved_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    // Two savers who both counted to the same number: the second fails instead of replacing the first.
    unique('chain_versions_chain_number_key').on(table.chainId, table.number),
    foreignKey({
      name: 'chain_versions_parent_fk',
      columns: [table.chainId, table.parentNumber],
      foreignColumns: [table.chainId, table.number],
    }),
    check('chain_versions_number_counts', sql`${table.number} >= 1`),
    check(
      'chain_versions_parent_earlier',
      sql`${table.parentNumber} is null or ${table.parentNumber} < ${table.number}`,
    ),
    check('chain_versions_note_length', sql`length(${table.note}) between 1 and 500`),
    check('chain_versions_checksum_form', sql`${table.checksum} ~ '^[0-9a-f]{64}$'`),
  ],
)

/**
 * Which stage of a chain's version is tied to which version of a design. The spec says so too; here the database holds that the version is
 * there, and answers where a design is used. A trigger refuses a link that the spec doesn't state, and any change afterwards.
 */
export const chainLinks = pgTable(
  'chain_links',
  {
    chainVersionId: uuid('chain_version_id')
      .notNull()
      .references(() => chainVersions.id, { onDelete: 'restrict' }),
    stageId: text('stage_id').notNull(),
    designId: uuid('design_id').notNull(),
    designVersion: integer('design_version').notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.chainVersionId, table.stageId] }),
    foreignKey({
      name: 'chain_links_version_fk',
      columns: [table.designId, table.designVersion],
      foreignColumns: [versions.designId, versions.number],
    }),
    // Asked from the design's side: which chains use it.
    index('chain_links_design_index').on(table.designId, table.designVersion),
  ],
)

/** One autosaved draft for each editor of a chain. */
export const chainDrafts = pgTable(
  'chain_drafts',
  {
    chainId: uuid('chain_id')
      .notNull()
      .references(() => chains.id, { onDelete: 'cascade' }),
    accountId: uuid('account_id')
      .notNull()
      .references(() => accounts.id, { onDelete: 'cascade' }),
    spec: jsonb().$type<ChainSpec>().notNull(),
    parentNumber: integer('parent_number'),
    /** Counts autosaves; a save that names another count than this one is refused, so that two open pages can't undo each other. */
    revision: integer().notNull(),
    updatedAt: timestamp('updated_at', { withTimezone: true }).notNull().defaultNow(),
  },
  (table) => [
    primaryKey({ columns: [table.chainId, table.accountId] }),
    index('chain_drafts_account_id_index').on(table.accountId),
    foreignKey({
      name: 'chain_drafts_parent_fk',
      columns: [table.chainId, table.parentNumber],
      foreignColumns: [chainVersions.chainId, chainVersions.number],
    }),
    check('chain_drafts_revision_counts', sql`${table.revision} >= 1`),
    // The route refuses larger bodies; this stops whatever comes another way.
    check('chain_drafts_spec_size', sql`pg_column_size(${table.spec}) <= 524288`),
  ],
)
