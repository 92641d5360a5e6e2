/** Something the person at the terminal can put right; its message is printed alone, without a stack. */
export class LaunchProblem extends Error {
  override readonly name = 'LaunchProblem';
}
