package linkworthy.cluster;

import java.io.DataInputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.net.InetAddress;
import java.net.ServerSocket;
import java.net.Socket;
import java.net.SocketException;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.TimeUnit;

/** Lets the codecs of {@link linkworthy.cluster.gate.GateFamily} through, or holds them. */
final class GateServer implements AutoCloseable {
  private static final int DEADLINE_S = 120;

  private final ServerSocket server;
  private final BlockingQueue<Long> held = new LinkedBlockingQueue<>();
  private final List<Socket> waiting = new ArrayList<>();
  private int permits = Integer.MAX_VALUE;

  GateServer() throws IOException {
    server = new ServerSocket(0, 50, InetAddress.getLoopbackAddress());
    Thread thread = new Thread(this::serve, "gate");
    thread.setDaemon(true);
    thread.start();
  }

  int port() {
    return server.getLocalPort();
  }

  private void serve() {
    try {
      while (true) {
        Socket socket = server.accept();
        long pid = new DataInputStream(socket.getInputStream()).readLong();
        take(socket, pid);
      }
    } catch (SocketException closed) {
      // The test is over.
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  private synchronized void take(Socket socket, long pid) {
    if (permits > 0) {
      permits--;
      pass(socket);
    } else {
      waiting.add(socket);
      held.add(pid);
    }
  }

  private static void pass(Socket socket) {
    try (socket) {
      socket.getOutputStream().write(1);
    } catch (IOException e) {
      // Its process was killed while it waited.
    }
  }

  /** Lets so many more through, then holds the rest. */
  synchronized void holdAfter(int passes) {
    held.clear();
    permits = passes;
  }

  /** The process of the next one that is held. */
  long nextHeld() {
    try {
      Long pid = held.poll(DEADLINE_S, TimeUnit.SECONDS);
      if (pid == null) {
        throw new AssertionError("nothing came to the gate within " + DEADLINE_S + " s");
      }
      return pid;
    } catch (InterruptedException e) {
      throw new AssertionError(e);
    }
  }

  /** Lets all through. */
  synchronized void open() {
    permits = Integer.MAX_VALUE;
    waiting.forEach(GateServer::pass);
    waiting.clear();
  }

  @Override
  public void close() throws IOException {
    open();
    server.close();
  }
}
