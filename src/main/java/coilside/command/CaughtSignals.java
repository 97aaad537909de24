package coilside.command;

import java.lang.reflect.InvocationTargetException;
import java.lang.reflect.Proxy;
import java.util.ArrayDeque;
import java.util.Deque;
import java.util.function.Consumer;

/**
 * Signals of the operating system that a handler gets instead, until this is closed. The class
 * behind it ({@code sun.misc.Signal}, module jdk.unsupported) cannot be named under {@code
 * -Werror}, so it is reached by reflection; where it is missing, or the signal is ignored by the
 * program that started this one (as under {@code nohup}), nothing changes.
 */
final class CaughtSignals implements AutoCloseable {
  private record Old(Object signal, Object handler) {}

  private final Deque<Old> old = new ArrayDeque<>();

  /** From now on the handler is called with the name of such a signal, on a thread of its own. */
  void add(String name, Consumer<String> handler) {
    try {
      Class<?> type = handlerType();
      Object proxy =
          Proxy.newProxyInstance(
              type.getClassLoader(),
              new Class<?>[] {type},
              (self, method, args) ->
                  switch (method.getName()) {
                    case "handle" -> {
                      handler.accept(name);
                      yield null;
                    }
                    case "equals" -> self == args[0];
                    case "hashCode" -> System.identityHashCode(self);
                    default -> "handler of " + name;
                  });
      Object signal = signalType().getConstructor(String.class).newInstance(name);
      old.push(new Old(signal, handle(signal, proxy)));
    } catch (ReflectiveOperationException e) {
      // As the class says: this signal keeps its usual effect.
    }
  }

  private static Object handle(Object signal, Object handler) throws ReflectiveOperationException {
    try {
      return signalType()
          .getMethod("handle", signalType(), handlerType())
          .invoke(null, signal, handler);
    } catch (InvocationTargetException e) {
      throw new ReflectiveOperationException(e.getCause());
    }
  }

  private static Class<?> signalType() throws ClassNotFoundException {
    return Class.forName("sun.misc.Signal");
  }

  private static Class<?> handlerType() throws ClassNotFoundException {
    return Class.forName("sun.misc.SignalHandler");
  }

  @Override
  public void close() {
    while (!old.isEmpty()) {
      Old one = old.pop();
      try {
        handle(one.signal(), one.handler());
      } catch (ReflectiveOperationException e) {
        // Set before, so it can be set again; if not, the program is about to end.
      }
    }
  }
}
