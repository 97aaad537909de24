package coilside.command;

import coilside.bench.Finding;
import coilside.bench.Refusal;

/** Prints why a rung was refused and what to look at. */
final class Refusals {
  private Refusals() {}

  static void print(Finding finding, Output output) {
    print(finding.rung().id(), finding.refusal().orElseThrow(), output);
  }

  static void print(String what, Refusal refusal, Output output) {
    output.aside("");
    output.aside(what + " refused: " + refusal.reason());
    if (!refusal.likelyCauses().isEmpty()) {
      output.aside("most likely first:");
      int n = 1;
      for (String cause : refusal.likelyCauses()) {
        output.aside("  " + n++ + ". " + cause);
      }
    }
  }
}
