package coilside.board.link;

import java.time.Duration;

class MemoryLinkTest extends LinkContract {
  @Override
  Ends connect() {
    MemoryLink.Pair pair = MemoryLink.pair("in this process");
    return new Ends(pair.near(), pair.far());
  }

  @Override
  Link connectToNobody(Duration writeLimit) {
    return MemoryLink.pair("in this process", 1000, writeLimit).near();
  }
}
