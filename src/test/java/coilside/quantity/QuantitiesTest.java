package coilside.quantity;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class QuantitiesTest {
  @ParameterizedTest
  @CsvSource({
    "12.5us, SECOND, 1.25e-5",
    "12.5 µs, SECOND, 1.25e-5",
    "30s, SECOND, 30",
    "2h, SECOND, 7200",
    "5min, SECOND, 300",
    "8.1MHz, HERTZ, 8.1e6",
    "200kHz, HERTZ, 2e5",
    "0.1ms, SECOND, 1e-4",
    "50%, ONE, 0.5",
    "180deg, RADIAN, 3.141592653589793",
    "190mT, TESLA, 0.19"
  })
  void readsWhatPeopleType(String text, Unit unit, double expected) {
    assertEquals(expected, Quantities.parse(text, unit));
  }

  @ParameterizedTest
  @ValueSource(strings = {"30", "30kg", "NaN s", "1e999s", "", "s", "3..5s", "1s2", "Infinitys"})
  void refusesWithTheAllowedUnitsAndAnExample(String text) {
    String said =
        assertThrows(IllegalArgumentException.class, () -> Quantities.parse(text, Unit.SECOND))
            .getMessage();
    assertTrue(said.contains("ns, us, ms, s, min, h or d, as in 12.5us"), said);
    assertTrue(said.contains("'" + text + "'"), said);
  }

  @Test
  void refusesSigns() {
    assertThrows(IllegalArgumentException.class, () -> Quantities.parsePositive("0s", Unit.SECOND));
    assertThrows(
        IllegalArgumentException.class, () -> Quantities.parseNotNegative("-1s", Unit.SECOND));
    assertEquals(0, Quantities.parseNotNegative("0s", Unit.SECOND));
  }

  @Test
  void showsNoControlCharactersAndNoEndlessText() {
    String said =
        assertThrows(
                IllegalArgumentException.class,
                () -> Quantities.parse("\u001b[2J" + "9".repeat(500), Unit.SECOND))
            .getMessage();
    assertTrue(said.chars().noneMatch(Character::isISOControl), said);
    assertTrue(said.length() < 200, said);
  }

  @Test
  void ages() {
    assertEquals("12 s", AgeFormat.text(12.3));
    assertEquals("3 min", AgeFormat.text(180));
    assertEquals("2 h", AgeFormat.text(7200));
    assertEquals("3 d", AgeFormat.text(3 * 86400.0));
    assertEquals("0 s", AgeFormat.text(-5));
    assertEquals("unknown", AgeFormat.text(Double.NaN));
  }
}
