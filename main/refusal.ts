/** Exit status of the command line (contract): 2 sheet or command, 3 footage, 4 a body was lost, 1 anything else. */
export type RefusalStatus = 1 | 2 | 3 | 4;

/**
 * An error that a user can cause and mend. The message is one line that says what is wrong, where, and what to do.
 * Hosts show it as it is; anything that is not a Refusal is a defect of the program.
 */
export class Refusal extends Error {
  readonly code: string;
  readonly status: RefusalStatus;

  constructor(code: string, status: RefusalStatus, message: string, options?: ErrorOptions) {
    super(message, options);
    this.name = 'Refusal';
    this.code = code;
    this.status = status;
  }
}
