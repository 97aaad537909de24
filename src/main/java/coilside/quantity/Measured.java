package coilside.quantity;

import java.util.Objects;

/**
 * A measured value with its standard uncertainty (JCGM 100: one standard deviation), both in {@link
 * #unit()}.
 *
 * @param value the estimate, in {@code unit}
 * @param u the standard uncertainty, in {@code unit}; NaN only together with a non-empty {@code
 *     whyNoUncertainty}
 * @param unit the unit of both
 * @param whyNoUncertainty why there is no uncertainty; empty when there is one
 */
public record Measured(double value, double u, Unit unit, String whyNoUncertainty) {
  public Measured {
    Objects.requireNonNull(unit, "unit");
    Objects.requireNonNull(whyNoUncertainty, "whyNoUncertainty");
    if (Double.isNaN(u) == whyNoUncertainty.isEmpty()) {
      throw new IllegalArgumentException(
          "a measured value needs a standard uncertainty or the reason why it has none");
    }
    if (u < 0) {
      throw new IllegalArgumentException("standard uncertainty " + u + " is negative");
    }
  }

  /** A value with its standard uncertainty. */
  public static Measured of(double value, double u, Unit unit) {
    return new Measured(value, u, unit, "");
  }

  /** A value that has no standard uncertainty, with the reason. */
  public static Measured withoutUncertainty(double value, Unit unit, String why) {
    return new Measured(value, Double.NaN, unit, why);
  }

  public boolean hasUncertainty() {
    return whyNoUncertainty.isEmpty();
  }

  /** u/|value|; NaN where there is no uncertainty. */
  public double relative() {
    return u / Math.abs(value);
  }
}
