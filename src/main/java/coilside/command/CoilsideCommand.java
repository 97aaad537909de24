package coilside.command;

/** A command: checks what it was given, then runs. */
interface CoilsideCommand {
  /**
   * Runs the command.
   *
   * @return its exit status
   */
  int run(Output output) throws Exception;
}
