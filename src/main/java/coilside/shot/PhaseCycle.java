package coilside.shot;

import java.util.ArrayList;
import java.util.List;

/**
 * The phases that pulses and receiver take from scan to scan.
 *
 * @param name shown to people and kept with captures
 * @param steps one entry a scan, played round and round; not empty
 */
public record PhaseCycle(String name, List<Phases> steps) {
  /**
   * The phases of one scan, rad; added to what the shot itself prescribes.
   *
   * @param excite of the pulse that makes the signal (and of saturating pulses)
   * @param flip of inverting and refocusing pulses
   * @param receive of the receiver
   */
  public record Phases(double excite, double flip, double receive) {
    public static final Phases ZERO = new Phases(0, 0, 0);

    Phases plus(Phases other) {
      return new Phases(
          turn(excite + other.excite), turn(flip + other.flip), turn(receive + other.receive));
    }

    private static double turn(double phase) {
      double full = 2 * Math.PI;
      double rest = phase - full * Math.floor(phase / full);
      return full - rest < 1e-12 ? 0 : rest;
    }
  }

  private static final double QUARTER = Math.PI / 2;

  /** All phases zero. */
  public static final PhaseCycle NONE = new PhaseCycle("none", List.of(Phases.ZERO));

  /** Transmitter and receiver both reversed every other scan: removes the DC offset. */
  public static final PhaseCycle ALTERNATING =
      new PhaseCycle("alternating", List.of(Phases.ZERO, new Phases(Math.PI, Math.PI, Math.PI)));

  /**
   * Transmitter 0 1 2 3 quarter turns, the receiver follows: removes the DC offset and the
   * quadrature image (Hoult and Richards, Proc. R. Soc. Lond. A 344, 311-340, 1975; the reference
   * is from memory).
   */
  public static final PhaseCycle CYCLOPS =
      new PhaseCycle("cyclops", List.of(quarters(0), quarters(1), quarters(2), quarters(3)));

  /**
   * The inverting or refocusing pulse reversed every other scan, all else kept: what that pulse
   * itself leaves in the transverse plane cancels, recovery and echo stay.
   */
  public static final PhaseCycle FLIP_ALTERNATING =
      new PhaseCycle("flip-alternating", List.of(Phases.ZERO, new Phases(0, Math.PI, 0)));

  public PhaseCycle {
    steps = List.copyOf(steps);
    if (name.isBlank() || steps.isEmpty()) {
      throw new IllegalArgumentException("a phase cycle needs a name and at least one step");
    }
  }

  private static Phases quarters(int n) {
    return new Phases(n * QUARTER, n * QUARTER, n * QUARTER);
  }

  /** The phases of scan number {@code scan}, counted from 0. */
  public Phases at(int scan) {
    return steps.get(Math.floorMod(scan, steps.size()));
  }

  public int length() {
    return steps.size();
  }

  /** Every step of this one within each step of the other. */
  public PhaseCycle within(PhaseCycle outer) {
    List<Phases> all = new ArrayList<>();
    for (Phases o : outer.steps) {
      for (Phases i : steps) {
        all.add(i.plus(o));
      }
    }
    return new PhaseCycle(name + " in " + outer.name, all);
  }

  /** The cycle with this name; case does not matter. */
  public static PhaseCycle named(String name) {
    for (PhaseCycle cycle : List.of(NONE, ALTERNATING, CYCLOPS, FLIP_ALTERNATING)) {
      if (cycle.name.equalsIgnoreCase(name.strip())) {
        return cycle;
      }
    }
    throw new IllegalArgumentException(
        "no such phase cycle; there are none, alternating, cyclops and flip-alternating");
  }
}
