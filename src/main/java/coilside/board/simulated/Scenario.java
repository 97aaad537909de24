package coilside.board.simulated;

import java.util.List;
import java.util.Objects;

/**
 * A made-up bench: sample, magnet, coil, transmitter, receiver and what disturbs them. All values
 * in SI units; voltages at the receiver input unless said otherwise.
 *
 * @param name what the scenario is called
 * @param note one line about it; may be empty
 * @param sample what is in the coil
 * @param magnet the field and how it moves
 * @param coil tuning, ringing and B1
 * @param transmitter the pulse amplifier
 * @param receiver noise and imperfections up to the ADC
 * @param interference lines from outside
 */
public record Scenario(
    String name,
    String note,
    Sample sample,
    Magnet magnet,
    Coil coil,
    Transmitter transmitter,
    Receiver receiver,
    List<Interference> interference) {
  public Scenario {
    Objects.requireNonNull(name);
    Objects.requireNonNull(note);
    interference = List.copyOf(interference);
  }

  /**
   * What is in the coil.
   *
   * @param signalVolts amplitude right after a 90-degree pulse on recovered spins, coil in tune, V
   * @param phaseRadians phase that cables add to what is received, rad
   * @param components kinds of spins; fractions are used relative to their sum
   */
  public record Sample(double signalVolts, double phaseRadians, List<Component> components) {
    public Sample {
      components = List.copyOf(components);
      if (components.isEmpty()) {
        throw new IllegalArgumentException("a sample needs at least one component");
      }
    }
  }

  /**
   * One kind of spins.
   *
   * @param fraction its part of the signal, &gt; 0
   * @param t1Seconds T1, s
   * @param t2Seconds T2, s; at most 2 T1
   * @param shiftHertz its Larmor frequency above the magnet's, Hz
   */
  public record Component(double fraction, double t1Seconds, double t2Seconds, double shiftHertz) {
    public Component {
      if (!(fraction > 0 && t1Seconds > 0 && t2Seconds > 0 && t2Seconds <= 2 * t1Seconds)) {
        throw new IllegalArgumentException(
            "fraction "
                + fraction
                + ", T1 "
                + t1Seconds
                + " s, T2 "
                + t2Seconds
                + " s: all must be above 0 and T2 at most 2 T1");
      }
    }
  }

  /** How the field over the sample is distributed. */
  public enum Shape {
    /** Cauchy distribution: the FID decays exponentially. */
    LORENTZIAN,
    /** Normal distribution. */
    GAUSSIAN,
    /** Two half Gaussians, the upper one 7/3 as wide as the lower one. */
    LOPSIDED
  }

  /**
   * The magnet.
   *
   * @param larmorHertz Larmor frequency at the reference temperature, Hz
   * @param referenceCelsius that temperature, degree Celsius
   * @param temperatureCoefficient relative change a kelvin, 1/K
   * @param shape of the field's distribution over the sample
   * @param widthHertz full width at half height of that distribution, Hz; 0 for a perfect field
   * @param mainsHertz frequency with which the field is modulated, Hz
   * @param mainsSwingHertz amplitude of that modulation, Hz; 0 for none
   * @param temperature the course of its temperature
   */
  public record Magnet(
      double larmorHertz,
      double referenceCelsius,
      double temperatureCoefficient,
      Shape shape,
      double widthHertz,
      double mainsHertz,
      double mainsSwingHertz,
      TemperatureCourse temperature) {}

  /**
   * The temperature against time t: start + drift t + swing sin(2 pi t / period).
   *
   * @param startCelsius at time zero, degree Celsius
   * @param driftKelvinPerSecond steady part, K/s
   * @param swingKelvin amplitude of the swing, K
   * @param periodSeconds its period, s, &gt; 0
   */
  public record TemperatureCourse(
      double startCelsius, double driftKelvinPerSecond, double swingKelvin, double periodSeconds) {
    /** The temperature at a time, degree Celsius. */
    double celsiusAt(double seconds) {
      return startCelsius
          + driftKelvinPerSecond * seconds
          + swingKelvin * Math.sin(2 * Math.PI * seconds / periodSeconds);
    }
  }

  /**
   * The coil: a tuned circuit of one resonance, response 1/(1 + 2 i Q (f - f0)/f0), whose ringing
   * decays in amplitude with the time constant Q/(pi f0).
   *
   * @param tunedHertz f0, Hz
   * @param quality Q
   * @param ringVolts amplitude of the ringing right after a long pulse at full amplitude, V
   * @param b1Spread relative standard deviation of B1 over the sample
   */
  public record Coil(double tunedHertz, double quality, double ringVolts, double b1Spread) {
    /** Amplitude time constant of the ringing, s. */
    double ringSeconds() {
      return quality / (Math.PI * tunedHertz);
    }
  }

  /**
   * The transmitter.
   *
   * @param pulse90Seconds 90-degree pulse at full amplitude with the coil in tune, s
   * @param compression c, how far the amplifier's gain at full amplitude lies below that at small
   *     amplitudes, as a part of the former, 0..0.4
   * @param dead true when no power reaches the coil
   */
  public record Transmitter(double pulse90Seconds, double compression, boolean dead) {
    /** An amplifier that follows its input exactly. */
    public Transmitter(double pulse90Seconds, boolean dead) {
      this(pulse90Seconds, 0, dead);
    }

    /** What reaches the coil, 1 at full amplitude: a (1 + c (1 - a^2)). */
    double drive(double amplitude) {
      return dead ? 0 : amplitude * (1 + compression * (1 - amplitude * amplitude));
    }
  }

  /**
   * The receiver.
   *
   * @param noiseDensity noise of one channel, V/sqrt(Hz): the standard deviation of one component
   *     of a complex sample is noiseDensity/sqrt(dwell)
   * @param railVolts largest voltage the amplifier delivers to the ADC, V; infinite for no limit
   * @param offsetIVolts DC offset of the in-phase channel at the ADC, V
   * @param offsetQVolts DC offset of the quadrature channel at the ADC, V
   * @param gainError quadrature gain relative to the in-phase gain, less 1
   * @param phaseErrorRadians departure of the channels from 90 degrees, rad
   * @param swapped true when the two channels are exchanged
   */
  public record Receiver(
      double noiseDensity,
      double railVolts,
      double offsetIVolts,
      double offsetQVolts,
      double gainError,
      double phaseErrorRadians,
      boolean swapped) {}

  /**
   * A steady line from outside.
   *
   * @param hertz its frequency, Hz (not an offset)
   * @param volts its amplitude, V
   */
  public record Interference(double hertz, double volts) {}
}
