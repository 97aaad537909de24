package coilside.terminal;

import java.util.Optional;

/** A small store of texts by name that outlives the program; given by the caller. Never throws. */
public interface SettingsStore {
  /** The text kept under this name. */
  Optional<String> get(String name);

  /** Keeps a text under this name; a failure to keep it is not worth stopping for. */
  void set(String name, String value);

  /** A store that forgets. */
  static SettingsStore none() {
    return new SettingsStore() {
      @Override
      public Optional<String> get(String name) {
        return Optional.empty();
      }

      @Override
      public void set(String name, String value) {
        // Nothing is kept.
      }
    };
  }
}
