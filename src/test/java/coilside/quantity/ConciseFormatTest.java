package coilside.quantity;

import static org.junit.jupiter.api.Assertions.assertEquals;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class ConciseFormatTest {
  @ParameterizedTest
  @CsvSource({
    "8123456.7, 1.2, HERTZ, 8.123 456 7(12) MHz",
    "1.103e-5, 9e-8, SECOND, 11.030(90) us",
    "0.12034, 0.0021, SECOND, 120.3(2.1) ms",
    "0.800, 0.3, SECOND, 0.80(30) s",
    "1234, 120, ONE, 1230(120)",
    "31.4, 0.25, DECIBEL, 31.40(25) dB",
    "1.21e-9, 3e-11, VOLT_PER_ROOT_HERTZ, 1.210(30) nV/Hz^0.5",
    "-0.0015, 0.0001, VOLT, -1.50(10) mV",
    "0, 0.01, ONE, 0.000(10)",
    "0.0999, 0.00996, ONE, 0.100(10)",
    "6.5e-6, 1e-7, ONE, 6.50(10) ppm",
    "25, 0.1, CELSIUS, 25.00(10) degC"
  })
  void ascii(double value, double u, Unit unit, String expected) {
    assertEquals(expected, ConciseFormat.ascii(Measured.of(value, u, unit)));
  }

  /** JCGM 100:2008, 7.2.2, example 2: m_S = 100.021 47(35) g, u = 0.35 mg. */
  @Test
  void theGuidesOwnExample() {
    assertEquals("100.021 47(35)", ConciseFormat.ascii(Measured.of(100.02147, 0.00035, Unit.ONE)));
  }

  /** CODATA prints 42.576 385 43(17) MHz/T. */
  @Test
  void asCodataPrintsIt() {
    Constant c = Constant.SHIELDED_PROTON_HERTZ_PER_TESLA;
    assertEquals(
        "42.576 385 43(17) MHz", ConciseFormat.text(Measured.of(c.value(), c.u(), Unit.HERTZ)));
  }

  @Test
  void withoutUncertainty() {
    assertEquals("8.0895 MHz", ConciseFormat.text(8.0895e6, Unit.HERTZ));
    assertEquals("12.5 µs", ConciseFormat.text(12.5e-6, Unit.SECOND));
    assertEquals("0", ConciseFormat.text(0, Unit.ONE));
    assertEquals("7200 s", ConciseFormat.text(7200, Unit.SECOND));
    assertEquals("unknown s", ConciseFormat.text(Double.NaN, Unit.SECOND));
    assertEquals("1.2 nV/√Hz", ConciseFormat.text(1.2e-9, Unit.VOLT_PER_ROOT_HERTZ));
  }
}
