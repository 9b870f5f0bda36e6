/** A date as read: `iso` for use, `day` false when only the month was printed (then `iso` is its last day). */
export interface ScanDate {
  raw?: string
  iso: string
  day: boolean
  /** `HH:MM`, where the carrier holds it. */
  time?: string
}

/** What an element string says besides the item. Attributes never change a count on their own. */
export type Gs1Attributes = Record<string, string | ScanDate>

/** `[code, where]`: something that was dropped or is doubtful, while the item itself stands. */
export type ScanIssue = [code: string, where: string]

export interface ShelfScan {
  kind: 'shelf'
  /** Eight characters, folded. */
  code: string
  display: string
}
export interface Gs1Scan {
  kind: 'gs1'
  /** 14 digits, or null when the code names no item (a delivery label, a person, a location). */
  gtin: string | null
  elements: [ai: string, value: string][]
  attrs: Gs1Attributes
  issues: ScanIssue[]
  /** The address the code was read from, as text; it is never opened. */
  link?: string
}
export interface HibcScan {
  kind: 'hibc'
  part: 'primary' | 'secondary' | 'combined'
  lic?: string
  pcn?: string
  uom?: number
  link?: string
  lot?: string
  serial?: string
  quantity?: number
  expiry?: ScanDate
  production?: ScanDate
  issues: ScanIssue[]
}
export interface TextScan {
  kind: 'text'
  text: string
}
export interface ErrorScan {
  kind: 'error'
  error: string
  ai?: string
}

/** What one scan means. JSON-serialisable. */
export type ScanResult = ShelfScan | Gs1Scan | HibcScan | TextScan | ErrorScan

/** How to read: `today` (YYYY-MM-DD) fixes the century of two-digit years. */
export interface ReadScanOptions {
  today: string
  /** Hosts whose `/B/<code>` addresses are our shelf labels. */
  ownHosts?: readonly string[]
  /** The engine's symbology when the scan carries no AIM identifier: `ean13`, `ean8`, `upca`, `upce`, `itf` … */
  format?: string
  /** What a keyboard scanner sends in place of the separator GS. */
  wedgeGs?: string
}
