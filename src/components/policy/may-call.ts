import type { Contract, Role } from '#shared/contracts/contract.ts'

/** Whether a role may make a call, by the contract itself; nobody without a role. */
export const mayCall = ({ allow }: Pick<Contract, 'allow'>, role: Role | null): boolean =>
  role !== null && (typeof allow === 'string' || allow.includes(role))
