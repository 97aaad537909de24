package coilside.command;

import coilside.bench.BenchDesk;
import coilside.terminal.TerminalOptions;
import coilside.terminal.TextInterface;
import java.time.Clock;

/** Starts the text interface on the bench that the options name. */
final class InterfaceLauncher {
  private InterfaceLauncher() {}

  static int run(CommonOptions options, Output output) throws Exception {
    Clock clock = Clock.systemUTC();
    OpenBench.Parts parts = OpenBench.Parts.open(options, clock);
    try (BenchDesk desk = parts.desk(clock)) {
      return TextInterface.run(desk, TerminalOptions.usual());
    } finally {
      parts.close();
    }
  }
}
