/** Why an entry was not taken in. Codes are fixed by the interface. */
export type RefusalCode =
  'invalid-operation' | 'unknown-bin' | 'out-of-scope' | 'key-reuse' | 'item-mismatch' | 'target-refused'

/** Thrown while judging one entry; the entry goes to quarantine, the rest of its batch goes on. */
export class Refusal extends Error {
  constructor(
    readonly code: RefusalCode,
    message: string,
    /** A person can mend it on the phone. */
    readonly fixable: boolean,
  ) {
    super(message)
  }
}

/** Thrown when an entry came before what it refers to, or in a version newer than this server. */
export class NotYet extends Error {
  constructor(
    readonly code: string,
    message: string,
  ) {
    super(message)
  }
}
