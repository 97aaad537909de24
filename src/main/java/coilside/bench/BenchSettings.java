package coilside.bench;

import coilside.quantity.Nucleus;
import java.util.Objects;
import java.util.OptionalDouble;

/**
 * What the operator decides: everything else is measured.
 *
 * @param nucleus what is looked for
 * @param searchLowHertz lower end of the resonance search, Hz
 * @param searchHighHertz upper end of the resonance search, Hz
 * @param amplitude transmit amplitude for all pulses, 0..1
 * @param sample what is in the coil
 * @param coil note on coil and tuning
 * @param expectedT1Seconds what T1 is expected to be, s; empty when unknown
 * @param pulse90Target wanted relative standard uncertainty of the 90-degree pulse
 * @param t1Target wanted relative standard uncertainty of T1
 * @param t2Target wanted relative standard uncertainty of T2* and T2
 * @param scanBudget most scans spent on one rung
 */
public record BenchSettings(
    Nucleus nucleus,
    double searchLowHertz,
    double searchHighHertz,
    double amplitude,
    String sample,
    String coil,
    OptionalDouble expectedT1Seconds,
    double pulse90Target,
    double t1Target,
    double t2Target,
    int scanBudget) {
  public BenchSettings {
    Objects.requireNonNull(nucleus, "nucleus");
    Objects.requireNonNull(sample, "sample");
    Objects.requireNonNull(coil, "coil");
    if (!(searchLowHertz > 0 && searchLowHertz < searchHighHertz)) {
      throw new IllegalArgumentException(
          "the search range "
              + searchLowHertz
              + " Hz to "
              + searchHighHertz
              + " Hz must rise from above 0 Hz");
    }
    if (!(amplitude > 0 && amplitude <= 1)) {
      throw new IllegalArgumentException(
          "transmit amplitude " + amplitude + " must be above 0 and at most 1");
    }
    if (scanBudget < 1) {
      throw new IllegalArgumentException("scan budget " + scanBudget + " must be at least 1");
    }
  }

  public BenchSettings withSample(String text) {
    return new BenchSettings(
        nucleus,
        searchLowHertz,
        searchHighHertz,
        amplitude,
        text,
        coil,
        expectedT1Seconds,
        pulse90Target,
        t1Target,
        t2Target,
        scanBudget);
  }

  public BenchSettings withAmplitude(double fraction) {
    return new BenchSettings(
        nucleus,
        searchLowHertz,
        searchHighHertz,
        fraction,
        sample,
        coil,
        expectedT1Seconds,
        pulse90Target,
        t1Target,
        t2Target,
        scanBudget);
  }
}
