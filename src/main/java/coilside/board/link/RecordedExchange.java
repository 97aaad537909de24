package coilside.board.link;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Optional;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/**
 * What passed between a program and a board, in order: read from a {@link WireLog} or from a file
 * written by hand in the same form. Lines that start with {@code #} or {@code =}, and empty ones,
 * are passed over; the time before the mark may be left out.
 *
 * @param passages what was said, each the other side's turn after the one before
 * @param end how it ended, where that was recorded
 */
public record RecordedExchange(List<Passage> passages, Optional<LinkException.Kind> end) {
  private static final long LONGEST_FILE = 512L << 20;
  private static final Pattern LINE = Pattern.compile("(?:[0-9]{1,12}\\.[0-9]{1,9} )?([<>!]) (.*)");

  /**
   * Bytes that went one way without an answer in between.
   *
   * @param toBoard true when the program sent them
   * @param bytes what was said; not to be changed
   * @param line number of its first line in the file, from 1
   */
  public record Passage(boolean toBoard, byte[] bytes, int line) {}

  public RecordedExchange {
    passages = List.copyOf(passages);
  }

  /** Reads a file. */
  public static RecordedExchange read(Path file) throws IOException {
    if (Files.size(file) > LONGEST_FILE) {
      throw new IOException(file + " is longer than " + (LONGEST_FILE >> 20) + " MB");
    }
    return parse(Files.readString(file, StandardCharsets.UTF_8), file.getFileName().toString());
  }

  /**
   * Reads an exchange.
   *
   * @param name what to call it in messages
   * @throws IOException a line cannot be read: which, and why
   */
  public static RecordedExchange parse(String text, String name) throws IOException {
    List<Passage> passages = new ArrayList<>();
    ByteArrayOutputStream bytes = new ByteArrayOutputStream();
    Optional<LinkException.Kind> end = Optional.empty();
    boolean toBoard = false;
    int firstLine = 0;
    int number = 0;
    for (String line : text.split("\r?\n", -1)) {
      number++;
      if (line.isBlank() || line.startsWith("#") || line.startsWith("=")) {
        continue;
      }
      Matcher m = LINE.matcher(line);
      if (!m.matches()) {
        throw new IOException(
            name + ", line " + number + ": expected '> bytes', '< bytes' or '! kind'");
      }
      try {
        if (m.group(1).equals("!")) {
          end = Optional.of(LinkException.Kind.valueOf(m.group(2).toUpperCase(Locale.ROOT)));
          break;
        }
        boolean nowToBoard = m.group(1).equals(">");
        if (bytes.size() > 0 && nowToBoard != toBoard) {
          passages.add(new Passage(toBoard, bytes.toByteArray(), firstLine));
          bytes.reset();
        }
        if (bytes.size() == 0) {
          firstLine = number;
          toBoard = nowToBoard;
        }
        bytes.writeBytes(WireText.parse(m.group(2)));
      } catch (IllegalArgumentException e) {
        throw new IOException(name + ", line " + number + ": " + e.getMessage(), e);
      }
    }
    if (bytes.size() > 0) {
      passages.add(new Passage(toBoard, bytes.toByteArray(), firstLine));
    }
    return new RecordedExchange(passages, end);
  }
}
