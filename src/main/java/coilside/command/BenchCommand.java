package coilside.command;

import coilside.board.BoardException;

/** A command that opens a bench, works on it, and closes it whatever happens. */
abstract class BenchCommand implements CoilsideCommand {
  /** The command's common options. */
  abstract CommonOptions common();

  /** Refuses wrong arguments before the bench is opened. */
  void check() {}

  /** True when a hang-up of the terminal does not end the work. */
  boolean survivesHangUp() {
    return false;
  }

  /** The work on the open bench. */
  abstract int work(OpenBench open, Output output) throws Exception;

  @Override
  public int run(Output output) throws Exception {
    check();
    OpenBench open = OpenBench.open(common(), output);
    try (Interrupt interrupt =
            survivesHangUp() ? Interrupt.ignoringHangUp(open::stop) : Interrupt.calls(open::stop);
        open) {
      try {
        int status = work(open, output);
        return interrupt.happened() ? ExitStatus.INTERRUPTED : status;
      } catch (BoardException.Stopped e) {
        output.clearProgress();
        output.aside("Stopped. What was finished is kept in " + common().captures + ".");
        return ExitStatus.INTERRUPTED;
      }
    }
  }
}
