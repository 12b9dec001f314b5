package linkworthy.cluster.gate;

import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.net.InetAddress;
import java.net.Socket;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import linkworthy.codec.Codec;
import linkworthy.codec.CodecFamily;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Memo;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.YamlNode;
import linkworthy.link.Importance;
import linkworthy.link.Link;
import linkworthy.link.Packet;

/**
 * Sends the mean of a picture, and fails on some. Where {@link #PORT} is set, each encoding first
 * tells its process id there and waits for an answer; that changes no result.
 */
public final class GateFamily implements CodecFamily {
  /** System property with a port on the loopback interface. */
  public static final String PORT = "linkworthy.test.gate";

  /** Made by {@link java.util.ServiceLoader}'s rules. */
  public GateFamily() {}

  @Override
  public String id() {
    return "gate";
  }

  @Override
  public String help() {
    return "gate: mean";
  }

  @Override
  public List<Codec> read(YamlNode entry, Link link) {
    return List.of(new Gate());
  }

  private record Gate() implements Codec {
    @Override
    public String label() {
      return "gate mean";
    }

    @Override
    public Description description() {
      return new Description("gate", "", "");
    }

    @Override
    public Map<String, Object> settings() {
      return Map.of("gate", "mean");
    }

    @Override
    public void check(PictureShape shape) {
      // Any shape will do.
    }

    @Override
    public Encoding encode(Picture picture, Memo memo) {
      passGate();
      int sum = Arrays.stream(picture.samples()).sum();
      if (sum % 4 == 0) {
        throw new IllegalStateException("a sum of " + sum + ", a multiple of 4");
      }
      byte[] mean = {(byte) (sum / picture.size())};
      return new Encoding(List.of(new Packet(mean, Importance.REST)), -1);
    }

    private static void passGate() {
      int port = Integer.getInteger(PORT, 0);
      if (port == 0) {
        return;
      }
      try (Socket socket = new Socket(InetAddress.getLoopbackAddress(), port)) {
        DataOutputStream out = new DataOutputStream(socket.getOutputStream());
        out.writeLong(ProcessHandle.current().pid());
        out.flush();
        int unused = new DataInputStream(socket.getInputStream()).readByte();
      } catch (IOException e) {
        throw new IllegalStateException("the gate is closed for good", e);
      }
    }

    @Override
    public Decoding decode(PictureShape shape, List<byte[]> arrived) {
      if (arrived.isEmpty() || arrived.get(0).length == 0) {
        return Decoding.nothing(shape);
      }
      int[] samples = new int[shape.size()];
      Arrays.fill(samples, arrived.get(0)[0] & 0xFF);
      return new Decoding(
          new Picture(shape.width(), shape.height(), shape.bitDepth(), samples),
          Decoding.Completeness.COMPLETE);
    }
  }
}
