package coilside.fit;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.List;
import org.apache.commons.math3.analysis.differentiation.DerivativeStructure;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/**
 * The NIST Statistical Reference Datasets for nonlinear regression, from both of their starting
 * points, to six digits of the certified values: validation of {@link LeastSquares}.
 */
class CertifiedFitsTest {
  private static final class Problem {
    final List<double[]> parameters = new ArrayList<>();
    final List<double[]> points = new ArrayList<>();
    double squares;
  }

  private interface Function {
    DerivativeStructure of(double x, DerivativeStructure[] b);
  }

  private static Problem read(String name) throws IOException {
    Problem p = new Problem();
    try (InputStream in = CertifiedFitsTest.class.getResourceAsStream("strd/" + name + ".txt")) {
      for (String line : new String(in.readAllBytes(), StandardCharsets.UTF_8).split("\n")) {
        String[] words = line.trim().split(" +");
        double[] numbers = new double[words.length - 1];
        if (line.startsWith("#")) {
          continue;
        }
        for (int i = 0; i < numbers.length; i++) {
          numbers[i] = Double.parseDouble(words[i + 1]);
        }
        switch (words[0]) {
          case "parameter" -> p.parameters.add(numbers);
          case "point" -> p.points.add(numbers);
          case "squares" -> p.squares = numbers[0];
          case "deviation" -> assertEquals(1, numbers.length);
          default -> throw new IOException("unknown line: " + line);
        }
      }
    }
    return p;
  }

  private static DerivativeStructure decay(DerivativeStructure rate, double x) {
    return rate.multiply(-x).exp();
  }

  private static DerivativeStructure bell(
      DerivativeStructure centre, DerivativeStructure width, double x) {
    DerivativeStructure z = centre.negate().add(x).divide(width);
    return z.multiply(z).negate().exp();
  }

  private static DerivativeStructure wave(
      DerivativeStructure period, DerivativeStructure cosine, DerivativeStructure sine, double x) {
    DerivativeStructure angle = period.reciprocal().multiply(2 * Math.PI * x);
    return cosine.multiply(angle.cos()).add(sine.multiply(angle.sin()));
  }

  private static Function function(String name) {
    return switch (name) {
      case "BoxBOD", "Misra1a" -> (x, b) -> b[0].multiply(decay(b[1], x).negate().add(1));
      case "Chwirut2" -> (x, b) -> decay(b[0], x).divide(b[1].add(b[2].multiply(x)));
      case "Lanczos3" ->
          (x, b) ->
              b[0].multiply(decay(b[1], x))
                  .add(b[2].multiply(decay(b[3], x)))
                  .add(b[4].multiply(decay(b[5], x)));
      case "MGH17" ->
          (x, b) -> b[0].add(b[1].multiply(decay(b[3], x))).add(b[2].multiply(decay(b[4], x)));
      case "Gauss1" ->
          (x, b) ->
              b[0].multiply(decay(b[1], x))
                  .add(b[2].multiply(bell(b[3], b[4], x)))
                  .add(b[5].multiply(bell(b[6], b[7], x)));
      case "ENSO" ->
          (x, b) ->
              b[0].add(b[1].multiply(Math.cos(2 * Math.PI * x / 12)))
                  .add(b[2].multiply(Math.sin(2 * Math.PI * x / 12)))
                  .add(wave(b[3], b[4], b[5], x))
                  .add(wave(b[6], b[7], b[8], x));
      default -> throw new IllegalArgumentException(name);
    };
  }

  /** The model with exact derivatives by automatic differentiation. */
  private static LeastSquares.Model model(Problem p, Function f) {
    return (b, values, jacobian) -> {
      DerivativeStructure[] variables = new DerivativeStructure[b.length];
      for (int j = 0; j < b.length; j++) {
        variables[j] = new DerivativeStructure(b.length, 1, j, b[j]);
      }
      for (int i = 0; i < values.length; i++) {
        DerivativeStructure v = f.of(p.points.get(i)[0], variables);
        values[i] = v.getValue();
        System.arraycopy(v.getAllDerivatives(), 1, jacobian[i], 0, b.length);
      }
    };
  }

  @ParameterizedTest
  @ValueSource(strings = {"BoxBOD", "Misra1a", "Chwirut2", "Lanczos3", "MGH17", "Gauss1", "ENSO"})
  void sixDigitsFromBothStarts(String name) throws Exception {
    Problem p = read(name);
    double[] y = p.points.stream().mapToDouble(r -> r[1]).toArray();
    for (int start = 0; start < 2; start++) {
      int column = start;
      double[] b = p.parameters.stream().mapToDouble(r -> r[column]).toArray();
      LeastSquares.Solution s = LeastSquares.solve(model(p, function(name)), y, null, b);
      assertEquals(p.squares, s.weightedSquares(), 1e-6 * p.squares, name + " sum of squares");
      for (int j = 0; j < b.length; j++) {
        double[] row = p.parameters.get(j);
        String what = name + " b" + (j + 1) + " from start " + (start + 1);
        assertEquals(row[2], s.parameters()[j], 1e-6 * Math.abs(row[2]), what);
        assertEquals(row[3], s.uFromScatter(j), 1e-4 * row[3], what + ", its deviation");
      }
    }
  }

  @Test
  void refusesWhatIsNotANumberInsteadOfBurningTheBudget() {
    NotDetermined e =
        assertThrows(
            NotDetermined.class,
            () ->
                LeastSquares.solve(
                    (b, values, jacobian) -> {},
                    new double[] {1, Double.NaN, 2},
                    null,
                    new double[] {1}));
    assertEquals(NotDetermined.Reason.BAD_INPUT, e.reason());
  }

  @Test
  void refusesParametersThatActAlike() {
    NotDetermined e =
        assertThrows(
            NotDetermined.class,
            () ->
                LeastSquares.solve(
                    (b, values, jacobian) -> {
                      for (int i = 0; i < values.length; i++) {
                        values[i] = b[0] + b[1];
                        jacobian[i][0] = 1;
                        jacobian[i][1] = 1;
                      }
                    },
                    new double[] {1, 2, 3},
                    null,
                    new double[] {1, 1}));
    assertEquals(NotDetermined.Reason.AMBIGUOUS, e.reason());
  }
}
