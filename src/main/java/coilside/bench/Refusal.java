package coilside.bench;

import java.util.List;

/**
 * Why a rung could not be measured: a finding of its own.
 *
 * @param reason what was tried and seen, with numbers and limits, one sentence
 * @param likelyCauses what the measured evidence points to, most likely first, each with what to do
 */
public record Refusal(String reason, List<String> likelyCauses) {
  public Refusal {
    likelyCauses = List.copyOf(likelyCauses);
  }
}
