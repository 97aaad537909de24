package coilside.terminal;

import java.lang.reflect.InvocationHandler;
import java.lang.reflect.Method;
import java.lang.reflect.Proxy;
import java.util.function.Consumer;

/**
 * Handlers for the signals of the operating system. The class behind it ({@code sun.misc.Signal},
 * module jdk.unsupported) cannot be named under {@code -Werror}, so it is reached by reflection;
 * where it is missing the signals keep their usual effect.
 */
final class Signals {
  private Signals() {}

  /** Calls the handler with the signal's name ("TERM") from now on; false when not possible. */
  static boolean handle(String name, Consumer<String> handler) {
    try {
      Class<?> signal = Class.forName("sun.misc.Signal");
      Class<?> handlerType = Class.forName("sun.misc.SignalHandler");
      Object s = signal.getConstructor(String.class).newInstance(name);
      InvocationHandler invocation =
          (proxy, method, args) -> answer(proxy, method, args, name, handler);
      Object h =
          Proxy.newProxyInstance(
              handlerType.getClassLoader(), new Class<?>[] {handlerType}, invocation);
      Method handle = signal.getMethod("handle", signal, handlerType);
      handle.invoke(null, s, h);
      return true;
    } catch (ReflectiveOperationException | IllegalArgumentException e) {
      return false;
    }
  }

  private static Object answer(
      Object proxy, Method method, Object[] args, String name, Consumer<String> handler) {
    return switch (method.getName()) {
      case "handle" -> {
        handler.accept(name);
        yield null;
      }
      case "equals" -> proxy == args[0];
      case "hashCode" -> System.identityHashCode(proxy);
      default -> "handler of " + name;
    };
  }
}
