package coilside.terminal;

/** A view that lies over the picture until it is left; it gets all keys while it is there. */
interface Panel {
  String title();

  /** The keys that work here, for the bottom line. */
  String keys();

  void draw(Canvas canvas, Area area, Snapshot state);

  /** Handles a key; false when the panel is to be left. */
  boolean key(Key key);

  /** True when it wants the whole screen. */
  default boolean fillsScreen() {
    return false;
  }
}
