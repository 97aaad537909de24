package coilside.board.profile;

import java.util.Collection;
import java.util.Optional;

/** Finds the known word nearest to a misspelt one. */
final class Spelling {
  private Spelling() {}

  /** The word with the fewest changed letters, where a third of its letters or fewer differ. */
  static Optional<String> nearest(String word, Collection<String> known) {
    String best = null;
    int least = Integer.MAX_VALUE;
    for (String candidate : known) {
      int d = distance(word, candidate);
      if (d < least) {
        least = d;
        best = candidate;
      }
    }
    boolean near =
        best != null
            && (least <= Math.max(1, Math.max(word.length(), best.length()) / 3)
                || best.startsWith(word)
                || word.startsWith(best));
    return near ? Optional.of(best) : Optional.empty();
  }

  private static int distance(String a, String b) {
    int[] row = new int[b.length() + 1];
    for (int j = 0; j <= b.length(); j++) {
      row[j] = j;
    }
    for (int i = 1; i <= Math.min(a.length(), 64); i++) {
      int diagonal = row[0];
      row[0] = i;
      for (int j = 1; j <= b.length(); j++) {
        int change = diagonal + (a.charAt(i - 1) == b.charAt(j - 1) ? 0 : 1);
        diagonal = row[j];
        row[j] = Math.min(change, 1 + Math.min(row[j], row[j - 1]));
      }
    }
    return row[b.length()];
  }
}
