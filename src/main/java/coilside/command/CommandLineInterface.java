package coilside.command;

import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;

/** The whole command line: the text interface by default, one subcommand for each job. */
@Command(
    name = "coilside",
    description = {
      "Measures what a low-field NMR bench must know before its results can be trusted.",
      "Without a command: the text interface."
    },
    versionProvider = Version.class,
    mixinStandardHelpOptions = true,
    subcommands = {
      ReadyCommand.class,
      MeasureCommand.class,
      FidCommand.class,
      LogCommand.class,
      LadderCommand.class,
      ShowCommand.class,
      ExportCommand.class,
      PortsCommand.class,
      SimulateCommand.class,
      CheckCommand.class,
      ReportCommand.class
    },
    footer = {
      "",
      "Exit status: 0 done; 1 measured but refused; 2 wrong usage or profile; 3 board out of",
      "reach; 4 stopped by a limit; 5 could not keep the data; 130 interrupted.",
      "Strong magnets, RF and high voltage: read the safety section of the README first.",
      "Never for use on people or animals."
    })
public final class CommandLineInterface implements CoilsideCommand {
  @Mixin CommonOptions common;

  private CommandLineInterface() {}

  /** Runs the command line and returns its exit status. */
  public static int run(String[] args) {
    return run(args, Output.standard());
  }

  static int run(String[] args, Output output) {
    CommandLine line = new CommandLine(new CommandLineInterface());
    line.setOut(output.out());
    line.setErr(output.err());
    line.setExecutionStrategy(parsed -> Failures.guarded(parsed, output));
    line.setParameterExceptionHandler((e, given) -> Failures.usage(e, output));
    line.setUsageHelpWidth(80);
    line.setAbbreviatedOptionsAllowed(false);
    line.setCaseInsensitiveEnumValuesAllowed(true);
    return line.execute(args);
  }

  @Override
  public int run(Output output) throws Exception {
    return InterfaceLauncher.run(common, output);
  }
}
