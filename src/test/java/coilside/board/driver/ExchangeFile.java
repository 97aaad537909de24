package coilside.board.driver;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;

/** A handwritten exchange: what the host says and what the board says, in order. */
record ExchangeFile(List<Part> parts) {
  /**
   * One stream of bytes in one direction, or the announcement of what comes next.
   *
   * @param mark '>' host, '&lt;' board, '=' announcement
   */
  record Part(char mark, byte[] bytes, String text) {}

  static ExchangeFile read(String name) throws IOException {
    List<Part> parts = new ArrayList<>();
    for (String line : Files.readAllLines(Path.of("src/test/resources/exchanges", name))) {
      if (line.isEmpty() || line.startsWith("#")) {
        continue;
      }
      char mark = line.charAt(0);
      if (line.length() < 3 || line.charAt(1) != ' ' || "><=".indexOf(mark) < 0) {
        throw new IOException("not an exchange line: " + line);
      }
      String rest = line.substring(2);
      byte[] bytes = mark == '=' ? new byte[0] : unescape(rest);
      if (mark != '=' && !parts.isEmpty() && parts.get(parts.size() - 1).mark() == mark) {
        Part last = parts.remove(parts.size() - 1);
        ByteArrayOutputStream both = new ByteArrayOutputStream();
        both.writeBytes(last.bytes());
        both.writeBytes(bytes);
        bytes = both.toByteArray();
      }
      parts.add(new Part(mark, bytes, rest));
    }
    return new ExchangeFile(parts);
  }

  static byte[] unescape(String text) throws IOException {
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    for (int i = 0; i < text.length(); i++) {
      char c = text.charAt(i);
      if (c != '\\') {
        out.write(c);
        continue;
      }
      char e = text.charAt(++i);
      switch (e) {
        case 'n' -> out.write('\n');
        case 'r' -> out.write('\r');
        case 't' -> out.write('\t');
        case '\\' -> out.write('\\');
        case 'x' -> {
          out.write(Integer.parseInt(text.substring(i + 1, i + 3), 16));
          i += 2;
        }
        default -> throw new IOException("unknown escape \\" + e);
      }
    }
    return out.toByteArray();
  }
}
