/** A value outside the range in which a formula holds. Knows the quantity, never the user or the transport. */
export class DomainError extends Error {
  constructor(
    readonly quantity: string,
    readonly value: unknown,
    readonly requirement: string,
  ) {
    super(`${quantity} is ${String(value)}; it must be ${requirement}`);
    this.name = 'DomainError';
  }
}
