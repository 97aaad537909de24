package coilside.bench;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.time.Instant;
import java.util.Map;
import java.util.OptionalDouble;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Bounds on the values of a log. */
class LogRuleTest {
  private static LogRow row(String name, double value, double u, Unit unit) {
    return new LogRow(
        "log-a",
        0,
        Instant.EPOCH,
        Instant.EPOCH,
        Map.of(name, Measured.of(value, u, unit)),
        OptionalDouble.of(25),
        0,
        "",
        "");
  }

  @ParameterizedTest
  @CsvSource({
    "linewidth > 80Hz, linewidth, ABOVE, 80",
    "t2_star<2 ms, t2_star, BELOW, 0.002",
    "larmor_frequency > 8.1 MHz, larmor_frequency, ABOVE, 8.1e6",
    "snr < 20, snr, BELOW, 20",
    "temperature > 30degC, temperature, ABOVE, 30",
    "field < 189mT, field, BELOW, 0.189"
  })
  void rulesAreReadWithTheirUnits(String text, String value, LogRule.Side side, double limit) {
    LogRule rule = LogRule.parse(text, LogRule.Action.STOP);
    assertEquals(value, rule.value());
    assertEquals(side, rule.side());
    assertEquals(limit, rule.limit(), 1e-12 * limit);
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "linewidth > 80 | no unit",
        "linewidth > 80s | not a unit of frequency",
        "width > 80Hz | larmor_frequency",
        "linewidth = 80Hz | such as",
        "linewidth > | such as",
        "> 80Hz | such as"
      })
  void aWrongRuleIsRefusedWithWhatIsAllowed(String text, String word) {
    IllegalArgumentException e =
        assertThrows(
            IllegalArgumentException.class, () -> LogRule.parse(text, LogRule.Action.WARN));
    assertTrue(e.getMessage().contains(word), e.getMessage());
  }

  @Test
  void aValueIsBeyondWhenItIsSoByMoreThanItsUncertainty() {
    LogRule rule = LogRule.parse("linewidth > 80Hz", LogRule.Action.WARN);
    assertTrue(rule.broken(row("linewidth", 79, 0.1, Unit.HERTZ)).isEmpty());
    assertTrue(rule.broken(row("linewidth", 81, 2, Unit.HERTZ)).isEmpty());
    assertEquals(
        "linewidth is 83.0(2.0) Hz, above the bound of 80 Hz",
        rule.broken(row("linewidth", 83, 2, Unit.HERTZ)).orElseThrow());
    assertTrue(rule.broken(row("snr", 5, 1, Unit.ONE)).isEmpty(), "not in the row");
    assertTrue(
        LogRule.parse("temperature < 30degC", LogRule.Action.WARN)
            .broken(row("snr", 5, 1, Unit.ONE))
            .isPresent());
  }
}
