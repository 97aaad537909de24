package coilside.signal;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.api.Test;

class MatchedProjectionTest {
  private static final double[] TRUE = {1, 2.2, 1.5, -0.5, -1.5, -1.8, 0, 0.3};

  private static List<Fid> scans(Random random, double sigma) {
    List<Fid> scans = new ArrayList<>();
    for (double a : TRUE) {
      scans.add(
          Synthetic.sum(
              Synthetic.decay(2048, 1e-4, 0, a, 1.1, 300, 0.04),
              Synthetic.noise(random, 2048, 1e-4, sigma)));
    }
    return scans;
  }

  @Test
  void aKnownShapeGivesSignedAmplitudesWithTheirUncertainty() {
    Random random = new Random(41);
    Fid shape = Synthetic.decay(2048, 1e-4, 0, 1, 0, 300, 0.04);
    double squares = 0;
    int draws = 100;
    for (int i = 0; i < draws; i++) {
      MatchedProjection p = MatchedProjection.onShape(scans(random, 0.5), shape, 0.5);
      for (int j = 0; j < TRUE.length; j++) {
        double z = (p.amplitude(j).value() - TRUE[j]) / p.amplitude(j).u();
        squares += z * z / (draws * TRUE.length);
      }
    }
    assertEquals(1, squares, 0.2);
    // sqrt(T2*/(2 dwell)) times better than one sample.
    assertEquals(
        0.5 / Math.sqrt(0.04 / 2e-4),
        MatchedProjection.onShape(scans(random, 0.5), shape, 0.5).uncertainty(),
        0.5e-3);
  }

  @Test
  void theSingularVectorFindsTheShapeByItself() {
    MatchedProjection p = MatchedProjection.bySingularVector(scans(new Random(42), 0.1), 0.1);
    assertTrue(p.amplitude(1).value() > 0, "the largest amplitude is positive");
    for (int j = 0; j < TRUE.length; j++) {
      double ratio = p.amplitude(j).value() / p.amplitude(1).value();
      assertEquals(TRUE[j] / TRUE[1], ratio, 0.03, "scan " + j);
      assertEquals(0, p.across(j), 0.06);
    }
  }

  @Test
  void refusesEmptyScans() {
    Fid empty = new Fid(new double[64], new double[64], 1e-4, 0, 1);
    assertThrows(
        IllegalArgumentException.class,
        () -> MatchedProjection.bySingularVector(List.of(empty, empty), 1));
  }
}
