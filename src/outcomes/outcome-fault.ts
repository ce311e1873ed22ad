/** A block that is not what it should be: other columns, a row missing, a number that cannot be. */
export class OutcomeFault extends Error {
  override readonly name = 'OutcomeFault';
}
