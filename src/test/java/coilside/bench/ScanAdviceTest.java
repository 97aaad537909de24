package coilside.bench;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.util.List;
import org.junit.jupiter.api.Test;

/** Closed forms: Ernst angle arccos(exp(-TR/T1)), best repetition of 90-degree pulses 1.2564 T1. */
class ScanAdviceTest {
  private final List<String> lines = ScanAdvice.lines(40e-6, 0.12, 6e-3, 100, Double.NaN);

  @Test
  void fullRecoveryIsFiveT1() {
    assertTrue(lines.get(0).contains("every 600 ms"), lines.get(0));
  }

  @Test
  void ninetyDegreePulsesAreBestAt1256OfT1() {
    assertTrue(lines.get(1).contains("1.26 T1"), lines.get(1));
    // (1 - exp(-1.2564))/sqrt(1.2564) over (1 - exp(-5))/sqrt(5)
    double gain = (1 - Math.exp(-1.2564)) / Math.sqrt(1.2564) / ((1 - Math.exp(-5)) / Math.sqrt(5));
    assertTrue(lines.get(1).contains(String.format("%.2f times", gain)), lines.get(1));
  }

  @Test
  void theErnstAngleBelongsToTheShortestRepetition() {
    double degrees = Math.toDegrees(Math.acos(Math.exp(-0.031 / 0.12)));
    assertTrue(lines.get(2).contains(String.format("%.0f degrees", degrees)), lines.get(2));
  }

  @Test
  void tenTimesTheSnrTakesAHundredScans() {
    assertTrue(lines.get(3).contains("an SNR of 1000 takes 102 scans"), lines.get(3));
  }

  @Test
  void nothingIsAdvisedBeforeItIsKnown() {
    assertEquals(List.of(), ScanAdvice.lines(List.of()));
  }
}
