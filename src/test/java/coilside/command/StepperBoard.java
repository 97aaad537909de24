package coilside.command;

import coilside.board.simulated.FirmwareReceiver.Counts;
import coilside.board.simulated.ScenarioReader;
import coilside.board.simulated.SimulatedBench;
import coilside.board.simulated.SimulatedDigitiser;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Repeat;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.shot.Wait;
import java.io.BufferedOutputStream;
import java.io.BufferedReader;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStreamReader;
import java.io.OutputStream;
import java.net.InetAddress;
import java.net.ServerSocket;
import java.net.Socket;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Deque;
import java.util.List;
import java.util.Optional;

/**
 * A board with a line language of its own, in front of simulated spins: written from the sheet at
 * the head of its profile, knowing nothing of profiles. It serves one caller after the other.
 */
final class StepperBoard implements AutoCloseable {
  private static final double VOLTS_PER_COUNT = 1e-7;

  private record Loop(int count, List<Step> outer) {}

  private final ServerSocket server;
  private final SimulatedBench bench;
  private final Deque<Loop> loops = new ArrayDeque<>();
  private List<Step> steps = new ArrayList<>();
  private double carrier = 8e6;
  private double gain;

  StepperBoard(String scenario) throws IOException {
    bench =
        new SimulatedBench(
            ScenarioReader.named(scenario),
            new SimulatedDigitiser(VOLTS_PER_COUNT, 0, 0, Optional.empty()),
            11);
    server = new ServerSocket(0, 4, InetAddress.getLoopbackAddress());
    Thread thread = new Thread(this::serve, "stepper");
    thread.setDaemon(true);
    thread.start();
  }

  String address() {
    return "127.0.0.1:" + server.getLocalPort();
  }

  private void serve() {
    while (!server.isClosed()) {
      try (Socket caller = server.accept()) {
        caller.setTcpNoDelay(true);
        talk(caller);
      } catch (IOException e) {
        // The caller hung up, or the board is switched off.
      }
    }
  }

  private void talk(Socket caller) throws IOException {
    BufferedReader in =
        new BufferedReader(
            new InputStreamReader(caller.getInputStream(), StandardCharsets.US_ASCII));
    OutputStream out = new BufferedOutputStream(caller.getOutputStream(), 1 << 16);
    say(out, "+++ STEPPER 4 (fw 0.9)");
    out.flush();
    for (String line = in.readLine(); line != null; line = in.readLine()) {
      try {
        obey(line.split(" "), out);
      } catch (RuntimeException e) {
        say(out, "=9 " + line);
      }
      out.flush();
    }
  }

  private static void say(OutputStream out, String line) throws IOException {
    out.write((line + "\r\n").getBytes(StandardCharsets.US_ASCII));
  }

  private static double seconds(String nanoseconds) {
    return Long.parseLong(nanoseconds) * 1e-9;
  }

  private void obey(String[] word, OutputStream out) throws IOException {
    switch (word[0]) {
      case "F" -> carrier = Double.parseDouble(word[1]);
      case "A" -> gain = 52 - Integer.parseInt(word[1]);
      case "B", "X" -> {
        steps = new ArrayList<>();
        loops.clear();
      }
      case "P" ->
          steps.add(
              new Pulse(
                  seconds(word[1]),
                  Math.toRadians(Integer.parseInt(word[2])),
                  Integer.parseInt(word[3], 16) / 255.0));
      case "W" -> steps.add(new Wait(seconds(word[1])));
      case "R" -> steps.add(new Receive(Integer.parseInt(word[1]), seconds(word[2]), 0));
      case "L" -> {
        loops.push(new Loop(Integer.parseInt(word[1]), steps));
        steps = new ArrayList<>();
      }
      case "M" -> {
        Loop loop = loops.pop();
        loop.outer().add(new Repeat(loop.count(), steps));
        steps = loop.outer();
      }
      case "G" -> {
        say(out, "=0");
        for (Counts window : bench.play(new Shot(carrier, gain, 0, steps))) {
          window(window, out);
        }
        say(out, ".");
        return;
      }
      default -> {
        say(out, "=1 what");
        return;
      }
    }
    say(out, "=0");
  }

  private static void window(Counts counts, OutputStream out) throws IOException {
    ByteArrayOutputStream bytes = new ByteArrayOutputStream();
    for (double[] part : List.of(counts.i(), counts.q())) {
      for (double count : part) {
        bytes.writeBytes(ByteBuffer.allocate(4).putInt((int) Math.rint(count)).array());
      }
    }
    say(out, String.format("S %d %08x", counts.i().length, crc(bytes.toByteArray())));
    bytes.writeTo(out);
  }

  /** CRC-32/BZIP2 bit by bit. */
  private static int crc(byte[] bytes) {
    int register = -1;
    for (byte b : bytes) {
      register ^= (b & 0xff) << 24;
      for (int bit = 0; bit < 8; bit++) {
        register = register < 0 ? register << 1 ^ 0x04c11db7 : register << 1;
      }
    }
    return ~register;
  }

  @Override
  public void close() throws IOException {
    server.close();
  }
}
