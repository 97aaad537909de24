package coilside.command;

import coilside.bench.KeepException;
import coilside.board.BoardException;
import java.util.List;
import picocli.CommandLine;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.ParseResult;
import picocli.CommandLine.UnmatchedArgumentException;

/** Runs a parsed command and turns every failure into one paragraph and an exit status. */
final class Failures {
  private static final int OWN_MISTAKE = 70;

  private Failures() {}

  static int guarded(ParseResult parsed, Output output) {
    Integer help = CommandLine.executeHelpRequest(parsed);
    if (help != null) {
      output.out().flush();
      return help;
    }
    List<CommandLine> chain = parsed.asCommandLineList();
    CoilsideCommand command = chain.get(chain.size() - 1).getCommand();
    try {
      return command.run(output);
    } catch (UsageException e) {
      return tell(output, e.getMessage(), ExitStatus.USAGE);
    } catch (BoardException.OverLimit e) {
      return tell(output, e.getMessage(), ExitStatus.LIMIT);
    } catch (BoardException.Stopped e) {
      return tell(output, e.getMessage(), ExitStatus.INTERRUPTED);
    } catch (BoardException e) {
      return tell(output, e.getMessage(), ExitStatus.OUT_OF_REACH);
    } catch (KeepException e) {
      return tell(output, e.getMessage(), ExitStatus.NOT_KEPT);
    } catch (Exception e) {
      return tell(
          output,
          "a mistake in coilside itself: "
              + e
              + ". What was finished is kept. "
              + CrashLog.write(e),
          OWN_MISTAKE);
    }
  }

  static int usage(ParameterException e, Output output) {
    StringBuilder text = new StringBuilder(e.getMessage());
    if (e instanceof UnmatchedArgumentException unmatched) {
      List<String> near = unmatched.getSuggestions();
      if (!near.isEmpty()) {
        text.append(". Did you mean ").append(String.join(" or ", near)).append("?");
      }
    }
    text.append(" See '").append(e.getCommandLine().getCommandSpec().qualifiedName());
    text.append(" --help'.");
    return tell(output, text.toString(), ExitStatus.USAGE);
  }

  private static int tell(Output output, String text, int status) {
    output.clearProgress();
    output.aside("coilside: " + Output.printable(text));
    return status;
  }
}
