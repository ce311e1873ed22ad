/** An error of the operating system, such as a full disk; unlike faults of a program it tells the call that failed. */
export function isSystemError(error: unknown): error is NodeJS.ErrnoException {
  return error instanceof Error && 'syscall' in error;
}

/** Code of a system error such as ENOENT; undefined for anything else. */
export function errorCode(error: unknown): string | undefined {
  return isSystemError(error) ? error.code : undefined;
}
