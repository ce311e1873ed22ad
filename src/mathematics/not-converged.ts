/**
 * A bank that the stepper cannot take on: a search that does not come to an end, or a state that is no number. It says
 * nothing about other banks, unlike any other error, which is a mistake in the program.
 */
export class NotConverged extends Error {
  override readonly name = 'NotConverged';
}
