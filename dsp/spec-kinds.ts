import type { DesignSpec, FamilyDesign, FirDesign, OwnDesign } from './spec'

/*
 * What is asked of a spec everywhere, apart from the schema that reads one: a page that only looks at specs needs no validator.
 */

export const isFamilyDesign = (spec: DesignSpec): spec is FamilyDesign => 'analog' in spec
export const isFirDesign = (spec: DesignSpec): spec is FirDesign => 'fir' in spec
export const isOwnDesign = (spec: DesignSpec): spec is OwnDesign => 'own' in spec
