package coilside;

import coilside.command.CommandLineInterface;

/** Wiring only: hands the arguments to the command line and ends with its exit status. */
public final class Main {
  private Main() {}

  public static void main(String[] args) {
    System.exit(CommandLineInterface.run(args));
  }
}
