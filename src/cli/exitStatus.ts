/** What the program tells the shell. */
export const EXIT = {
  /** Everything asked for was done. */
  done: 0,
  /** Wrong usage or wrong input. */
  usage: 2,
  /** Done, but a photo was not measured or a row was refused. */
  partly: 3,
  /** A fault of the program or of the machine. */
  fault: 70,
} as const;

export type ExitStatus = (typeof EXIT)[keyof typeof EXIT];
