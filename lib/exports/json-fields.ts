import * as z from 'zod'
import { chainJsonSchema } from './chain-json'
import { coefficientSetJsonSchema } from './json'

/** One line of the description of the JSON file. */
export interface FieldRow {
  /** As in `coefficients.sections[].b0`. */
  readonly path: string
  readonly kind: string
  readonly description: string
}

/** The parts of JSON Schema that ours is made of. */
interface Node {
  readonly type?: string | readonly string[] | undefined
  readonly description?: string | undefined
  readonly const?: unknown
  readonly enum?: readonly unknown[] | undefined
  readonly pattern?: string | undefined
  readonly properties?: Readonly<Record<string, Node>> | undefined
  readonly items?: Node | boolean | undefined
  readonly prefixItems?: readonly Node[] | undefined
  readonly anyOf?: readonly Node[] | undefined
  readonly oneOf?: readonly Node[] | undefined
}

const node: z.ZodType<Node> = z.lazy(() =>
  z.object({
    type: z.union([z.string(), z.array(z.string())]).optional(),
    description: z.string().optional(),
    const: z.unknown().optional(),
    enum: z.array(z.unknown()).optional(),
    pattern: z.string().optional(),
    properties: z.record(z.string(), node).optional(),
    items: z.union([node, z.boolean()]).optional(),
    prefixItems: z.array(node).optional(),
    anyOf: z.array(node).optional(),
    oneOf: z.array(node).optional(),
  }),
)

/** Every field of the JSON file, read from the schema that is served, so that the page can't say anything else. */
export const coefficientSetFields = (): readonly FieldRow[] => fieldsOfSchema(coefficientSetJsonSchema())

/** The same of a chain's file. The spec of a linked design is the one that the design's own page states, and is left out. */
export const chainFields = (): readonly FieldRow[] =>
  fieldsOfSchema(chainJsonSchema()).filter(({ path }) => !path.includes('.link.spec.'))

function fieldsOfSchema(schema: unknown): readonly FieldRow[] {
  const rows = fieldsOf(node.parse(schema), '')
  // What several branches have alike is listed once.
  return rows.filter(
    ({ path, kind }, index) => rows.findIndex((other) => other.path === path && other.kind === kind) === index,
  )
}

function fieldsOf(parent: Node, path: string): FieldRow[] {
  const rows = Object.entries(parent.properties ?? {}).flatMap(([name, child]) => {
    const own = path === '' ? name : `${path}.${name}`
    return [{ path: own, kind: kindOf(child), description: child.description ?? '' }, ...fieldsOf(child, own)]
  })
  const branches = [...(parent.anyOf ?? []), ...(parent.oneOf ?? [])].flatMap((branch) => fieldsOf(branch, path))
  const items = typeof parent.items === 'object' ? fieldsOf(parent.items, `${path}[]`) : []
  return [...rows, ...branches, ...items]
}

function kindOf(child: Node): string {
  if (child.const !== undefined) return JSON.stringify(child.const)
  if (child.enum) return child.enum.map((value) => JSON.stringify(value)).join(' or ')
  const branches = [...(child.anyOf ?? []), ...(child.oneOf ?? [])]
  if (branches.length > 0) return branches.map(kindOf).join(' or ')
  if (child.type === 'array') {
    if (child.prefixItems) return `[${child.prefixItems.map(kindOf).join(', ')}]`
    return typeof child.items === 'object' ? `list of ${kindOf(child.items)}` : 'list'
  }
  return typeof child.type === 'object' ? child.type.join(' or ') : (child.type ?? 'any')
}
