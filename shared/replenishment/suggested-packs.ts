/** What a bin works out at. Units of use. */
export interface SuggestionInput {
  position: number
  reorderPoint: number
  /** Order-up-to level; null where only a reorder point was entered. */
  parLevel: number | null
  packSize: number
  capacity: number | null
}

/** Packs that fill up to par: rounded up, at least one, never past what the shelf holds. */
export function suggestedPacks(input: SuggestionInput): number {
  const par = input.parLevel ?? input.reorderPoint + input.packSize
  const wanted = Math.ceil((par - input.position) / input.packSize)
  const fits = input.capacity === null ? wanted : Math.floor((input.capacity - input.position) / input.packSize)
  return Math.max(1, Math.min(wanted, fits))
}
