package coilside.bench;

import java.util.List;
import java.util.Locale;

/** A quantity the bench must know before a result can be trusted, and what it rests on. */
public enum Rung {
  NOISE("noise density and interference"),
  RESONANCE("Larmor frequency and field", NOISE),
  GAIN("receiver gain", RESONANCE),
  RINGDOWN("ring-down and receive delay", GAIN),
  NUTATION("90-degree pulse and B1", RESONANCE, GAIN, RINGDOWN),
  T1("T1 and repetition time", NUTATION),
  T2STAR("T2*, linewidth, SNR", NUTATION, T1),
  T2("T2 by an echo train", NUTATION, T1);

  private final String title;
  private final List<Rung> restsOn;

  Rung(String title, Rung... restsOn) {
    this.title = title;
    this.restsOn = List.of(restsOn);
  }

  /** What it finds, for people. */
  public String title() {
    return title;
  }

  /** The rungs directly beneath. */
  public List<Rung> restsOn() {
    return restsOn;
  }

  /** The name used on the command line and in records. */
  public String id() {
    return name().toLowerCase(Locale.ROOT);
  }

  /** The rung with this id, or an exception that lists the ids. */
  public static Rung ofId(String id) {
    for (Rung rung : values()) {
      if (rung.id().equals(id)) {
        return rung;
      }
    }
    throw new IllegalArgumentException(
        "'"
            + id
            + "' is no rung; the rungs are "
            + String.join(", ", List.of(values()).stream().map(Rung::id).toList()));
  }
}
