package coilside.quantity;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;

import org.junit.jupiter.api.Test;

class NucleusTest {
  /** Worked values of the shielded proton, from CODATA 2022. */
  @Test
  void protonFrequencyAndField() {
    double perTesla = Nucleus.HYDROGEN_1.larmorHertzPerTesla();
    assertEquals(21.288_193e6, 0.5 * perTesla, 0.5);
    assertEquals(46.974_396e-3, 2e6 / perTesla, 1e-9);
    assertEquals(500.277_32e-3, 21.3e6 / perTesla, 1e-8);
  }

  /** CODATA 2022 quantities agree among themselves: gamma/2 pi and the shielding. */
  @Test
  void constantsAgreeAmongThemselves() {
    Constant hertz = Constant.SHIELDED_PROTON_HERTZ_PER_TESLA;
    assertEquals(hertz.value(), Constant.SHIELDED_PROTON.value() / (2 * Math.PI), 2 * hertz.u());
    assertEquals(
        hertz.value(),
        Constant.PROTON_HERTZ_PER_TESLA.value() * (1 - Constant.PROTON_SHIELDING.value()),
        2 * hertz.u());
  }

  /** IUPAC 2001: gamma ratios follow the frequency ratios within the shieldings (31P: 9.1e-4). */
  @Test
  void frequencyRatiosFollowTheGyromagneticRatios() {
    for (Nucleus n : Nucleus.values()) {
      double gammas = n.gyromagneticRatio() / Nucleus.HYDROGEN_1.gyromagneticRatio();
      assertEquals(1, gammas / (n.frequencyRatioPercent() / 100), 1e-3, n.symbol());
    }
  }

  @Test
  void bySymbol() {
    assertEquals(Nucleus.FLUORINE_19, Nucleus.ofSymbol("19f"));
    assertThrows(IllegalArgumentException.class, () -> Nucleus.ofSymbol("3He"));
  }
}
