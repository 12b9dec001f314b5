package linkworthy.noise;

import java.io.ByteArrayOutputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.function.IntFunction;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.core.source32.Philox4x32;

/**
 * Random streams by address. The address is hashed with SHA-256; the first 128 bits of the digest
 * choose a stream of the counter-based generator Philox4x32-10 (Salmon, Moraes, Dror and Shaw 2011,
 * "Parallel random numbers: as easy as 1, 2, 3").
 *
 * <p>Hashed bytes, big-endian, a text being its UTF-8 length as 32 bits and then its bytes: the
 * text {@code linkworthy noise stream 1}; the seed (64 bits); the texts picture, model fingerprint,
 * site id and severity axis; the severity value as IEEE 754 bits (64, a negative zero counts as
 * zero); the replicate (32 bits); the text purpose.
 *
 * <p>Digest bytes 0 to 3 and 4 to 7 are the key, 8 to 11 and 12 to 15 the upper half of the
 * counter. The lower half starts at zero, and as Philox4x32 counts up before it draws, the first
 * four 32-bit values belong to counter 1. A stream has room for 2^66 values; two streams overlap
 * only if all 128 bits agree, a chance below 2e-21 among a thousand million streams.
 */
public final class NoiseStreams {
  private static final String DOMAIN = "linkworthy noise stream 1";

  private NoiseStreams() {}

  /**
   * Opens the stream at an address: equal addresses give equal streams, on any machine and in any
   * order.
   *
   * @param seed the study's seed
   * @param picture id of the picture
   * @param modelFingerprint {@link NoiseModel#fingerprint()}
   * @param site where the model acts
   * @param severity how strongly
   * @param replicate number of the realisation, from 0
   * @param purpose what is drawn, where one trial draws several things
   */
  public static UniformRandomProvider open(
      long seed,
      String picture,
      String modelFingerprint,
      Site site,
      Severity severity,
      int replicate,
      String purpose) {
    ByteArrayOutputStream bytes = new ByteArrayOutputStream();
    try (DataOutputStream out = new DataOutputStream(bytes)) {
      text(out, DOMAIN);
      out.writeLong(seed);
      text(out, picture);
      text(out, modelFingerprint);
      text(out, site.id());
      text(out, severity.axis());
      out.writeLong(Double.doubleToLongBits(severity.value() + 0.0));
      out.writeInt(replicate);
      text(out, purpose);
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
    ByteBuffer digest = ByteBuffer.wrap(sha256(bytes.toByteArray()));
    int key0 = digest.getInt();
    int key1 = digest.getInt();
    int counter2 = digest.getInt();
    int counter3 = digest.getInt();
    return new Philox4x32(new int[] {key0, key1, 0, 0, counter2, counter3});
  }

  /**
   * A family of streams by number. It takes 96 bits from a stream: a key of 64, and 32 that stand
   * with the number in the upper half of the counter. So stream i depends on the stream it came
   * from and on i alone.
   */
  static IntFunction<UniformRandomProvider> numbered(UniformRandomProvider random) {
    int key0 = random.nextInt();
    int key1 = random.nextInt();
    int counter2 = random.nextInt();
    return number -> new Philox4x32(new int[] {key0, key1, 0, 0, counter2, number});
  }

  /** SHA-256, which every Java platform has. */
  static byte[] sha256(byte[] bytes) {
    try {
      return MessageDigest.getInstance("SHA-256").digest(bytes);
    } catch (NoSuchAlgorithmException e) {
      throw new IllegalStateException(e);
    }
  }

  private static void text(DataOutputStream out, String text) throws IOException {
    byte[] utf8 = text.getBytes(StandardCharsets.UTF_8);
    out.writeInt(utf8.length);
    out.write(utf8);
  }
}
