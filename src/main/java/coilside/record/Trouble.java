package coilside.record;

import coilside.bench.KeepException;
import java.io.IOException;
import java.nio.file.AccessDeniedException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.FileSystemException;
import java.nio.file.NoSuchFileException;
import java.nio.file.NotDirectoryException;
import java.nio.file.Path;
import java.sql.SQLException;
import java.util.Locale;
import org.sqlite.SQLiteErrorCode;

/** What went wrong while keeping, in words with what to do about it. */
final class Trouble {
  private Trouble() {}

  /** An error about a file or folder. */
  static KeepException with(String what, Path path, IOException e) {
    return new KeepException(what + " " + path + ": " + words(e) + "; " + advice(e), e);
  }

  /** An error from the record's SQLite file. */
  static KeepException with(String what, Path path, SQLException e) {
    int primary = e.getErrorCode() & 0xff;
    String advice;
    if (primary == SQLiteErrorCode.SQLITE_FULL.code) {
      advice = "the disk is full; free some space or choose another folder with --captures DIR";
    } else if (primary == SQLiteErrorCode.SQLITE_READONLY.code
        || primary == SQLiteErrorCode.SQLITE_PERM.code) {
      advice = "it may not be written; check its permissions or choose another --captures DIR";
    } else if (primary == SQLiteErrorCode.SQLITE_BUSY.code
        || primary == SQLiteErrorCode.SQLITE_LOCKED.code) {
      advice = "another program holds it locked; close that program and try again";
    } else if (primary == SQLiteErrorCode.SQLITE_CORRUPT.code
        || primary == SQLiteErrorCode.SQLITE_NOTADB.code) {
      advice =
          "it is damaged or no bench record; move it away and start again (the captures beside it"
              + " can still be read)";
    } else if (primary == SQLiteErrorCode.SQLITE_IOERR.code) {
      advice = "reading or writing failed; check the disk, and whether it is full";
    } else if (primary == SQLiteErrorCode.SQLITE_CANTOPEN.code) {
      advice = "it cannot be opened; check that it exists and may be read";
    } else {
      advice = "SQLite says: " + words(e);
    }
    return new KeepException(what + " " + path + ": " + advice, e);
  }

  /** The reason of an exception without its class name. */
  static String words(Throwable e) {
    if (e instanceof AccessDeniedException) {
      return "permission denied";
    }
    if (e instanceof NoSuchFileException) {
      return "there is no such file or folder";
    }
    if (e instanceof NotDirectoryException || e instanceof FileAlreadyExistsException) {
      return "a file that is no folder stands in the way";
    }
    if (e instanceof FileSystemException f && f.getReason() != null) {
      return f.getReason().toLowerCase(Locale.ROOT);
    }
    String message = e.getMessage();
    return message == null ? e.getClass().getSimpleName() : Words.oneLine(message, 300);
  }

  private static String advice(IOException e) {
    String words = words(e).toLowerCase(Locale.ROOT);
    if (words.contains("no space") || words.contains("quota")) {
      return "free some space or choose another folder with --captures DIR";
    }
    if (words.contains("read-only")) {
      return "choose a folder that can be written with --captures DIR";
    }
    if (words.contains("permission")) {
      return "change its permissions or choose another folder with --captures DIR";
    }
    return "choose another folder with --captures DIR";
  }
}
