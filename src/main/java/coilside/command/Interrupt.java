package coilside.command;

import java.util.concurrent.atomic.AtomicBoolean;

/**
 * Turns Ctrl-C and TERM into a call that stops the work, instead of the end of the program: the
 * command then ends by itself with what was finished kept. A second signal ends the program.
 */
final class Interrupt implements AutoCloseable {
  private final AtomicBoolean happened = new AtomicBoolean();
  private final sun.misc.SignalHandler handler;
  private final sun.misc.SignalHandler oldInterrupt;
  private final sun.misc.SignalHandler oldTerminate;

  private Interrupt(Runnable stop) {
    handler =
        signal -> {
          if (!happened.compareAndSet(false, true)) {
            Runtime.getRuntime().halt(ExitStatus.INTERRUPTED);
          }
          new Thread(stop, "stop").start();
        };
    oldInterrupt = sun.misc.Signal.handle(new sun.misc.Signal("INT"), handler);
    oldTerminate = sun.misc.Signal.handle(new sun.misc.Signal("TERM"), handler);
  }

  static Interrupt calls(Runnable stop) {
    return new Interrupt(stop);
  }

  boolean happened() {
    return happened.get();
  }

  @Override
  public void close() {
    sun.misc.Signal.handle(new sun.misc.Signal("INT"), oldInterrupt);
    sun.misc.Signal.handle(new sun.misc.Signal("TERM"), oldTerminate);
  }
}
