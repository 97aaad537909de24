package coilside.board;

import coilside.shot.Shot;

/** A shot that passed the guard. Only {@link GuardedBoard} makes one. */
public final class ClearedShot {
  private final Shot shot;

  ClearedShot(Shot shot) {
    this.shot = shot;
  }

  public Shot shot() {
    return shot;
  }
}
