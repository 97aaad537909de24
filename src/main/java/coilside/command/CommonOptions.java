package coilside.command;

import java.nio.file.Path;
import picocli.CommandLine.Option;

/** Options that most commands share. */
final class CommonOptions {
  @Option(
      names = "--board",
      paramLabel = "PROFILE[@PORT]",
      description = {
        "device profile (a file, or the name of a shipped one), and the port:",
        "a path, HOST:PORT, or 'simulated'. Without it: the simulated bench."
      })
  String board;

  @Option(
      names = "--captures",
      paramLabel = "DIR",
      description = "where captures and the bench record are kept (default: ./captures)")
  Path captures = Path.of("captures");

  @Option(
      names = "--sample",
      paramLabel = "TEXT",
      description = "what is in the coil; remembered until changed")
  String sample;

  @Option(
      names = "--coil",
      paramLabel = "TEXT",
      description = "note on coil and tuning; remembered until changed")
  String coil;

  @Option(
      names = "--amplitude",
      paramLabel = "FRACTION",
      description = "transmit amplitude, 0..1 or in percent; remembered until changed")
  String amplitude;

  @Option(
      names = "--search",
      paramLabel = "LOW..HIGH",
      description = "where to look for the resonance, such as 7.9MHz..8.3MHz")
  String search;

  @Option(
      names = "--expected-t1",
      paramLabel = "TIME",
      description = "what T1 is expected to be, such as 120ms")
  String expectedT1;

  @Option(
      names = "--scan-budget",
      paramLabel = "N",
      description = "most scans spent on one rung (default: ${DEFAULT-VALUE})",
      defaultValue = "64")
  int scanBudget;

  @Option(names = "--json", description = "print one JSON document and nothing else")
  boolean json;

  @Option(names = "--plain", description = "no colour, ASCII only")
  boolean plain;

  @Option(
      names = "--seed",
      paramLabel = "N",
      description = "simulated bench: where its chance starts (default: ${DEFAULT-VALUE})",
      defaultValue = "1")
  long seed;

  @Option(
      names = "--scenario",
      paramLabel = "FILE",
      description = {
        "simulated bench: a scenario file, or the name of a shipped one",
        "(doped-water, cooking-oil, plain-water, bad-day)"
      })
  String scenario;

  @Option(names = "--paced", description = "simulated bench: takes the time a real one would")
  boolean paced;

  @Option(
      names = "--wire-log",
      paramLabel = "FILE",
      description = "write everything that goes over the wire to this file")
  Path wireLog;
}
