package coilside.command;

import java.io.PrintWriter;
import java.io.StringWriter;

/**
 * A command line run inside the test.
 *
 * @param status exit status
 * @param out what went to standard output
 * @param err what went to the error stream
 */
record CommandRun(int status, String out, String err) {
  static CommandRun of(String... args) {
    StringWriter out = new StringWriter();
    StringWriter err = new StringWriter();
    int status =
        CommandLineInterface.run(
            args, new Output(new PrintWriter(out), new PrintWriter(err), false));
    return new CommandRun(status, out.toString(), err.toString());
  }
}
