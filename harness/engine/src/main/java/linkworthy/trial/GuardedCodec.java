package linkworthy.trial;

import java.util.List;
import java.util.concurrent.CancellationException;
import java.util.function.Supplier;
import linkworthy.codec.Codec;
import linkworthy.codec.CodecFailure;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Failure;
import linkworthy.codec.Memo;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.Unavailable;
import linkworthy.link.Link;
import linkworthy.link.Packet;
import org.jspecify.annotations.Nullable;

/**
 * A codec of which nothing is believed: whatever it throws or returns becomes a result or a {@link
 * Failure}, and the run goes on. Three things end the run all the same: {@link Unavailable},
 * because the machine and not the codec is at fault; {@link CancellationException}, because the run
 * is being stopped; and a lack of memory.
 */
final class GuardedCodec {
  private static final Encoding NOTHING = new Encoding(List.of(), -1);

  private final Codec codec;
  private final Link link;
  private final PlaneCoding coding;

  /**
   * @param link what the codec may fill
   * @param coding how planes go through it
   */
  GuardedCodec(Codec codec, Link link, PlaneCoding coding) {
    this.codec = codec;
    this.link = link;
    this.coding = coding;
  }

  /**
   * What an encoder gave.
   *
   * @param encoding no packets where it failed
   * @param failure or null
   */
  record Sent(Encoding encoding, @Nullable Failure failure) {}

  Sent encode(List<Picture> planes, List<Memo> memos) {
    try {
      Encoding encoding = coding.encode(codec, planes, memos);
      Failure failure = failure(encoding);
      return new Sent(failure == null ? encoding : NOTHING, failure);
    } catch (Throwable thrown) {
      return new Sent(NOTHING, failure(thrown));
    }
  }

  private @Nullable Failure failure(@Nullable Encoding encoding) {
    if (encoding == null) {
      return new Failure(Failure.NO_RESULT, "encode returned null");
    }
    int longest = encoding.packets().stream().mapToInt(Packet::length).max().orElse(0);
    return longest <= link.payloadBytes()
        ? null
        : new Failure(
            Failure.PACKET_SIZE,
            "a packet has " + longest + " bytes; accepted: up to " + link.payloadBytes());
  }

  /** Decodes; an outage with the encoder's failure where that failed. */
  PlaneCoding.Decoded decode(List<PictureShape> shapes, Sent sent, List<byte[]> arrived) {
    Failure failed = sent.failure();
    return coding.decode(
        failed == null ? this::decode : (plane, shape, packets) -> Decoding.failed(shape, failed),
        shapes,
        arrived);
  }

  /** Decodes all that was sent, undamaged. */
  PlaneCoding.Decoded decodeAll(List<PictureShape> shapes, Sent sent) {
    Supplier<Picture> whole = sent.encoding().whole();
    return whole == null
        ? decode(shapes, sent, sent.encoding().payloads())
        : coding.decode(
            (plane, shape, packets) ->
                guarded(shape, () -> new Decoding(whole.get(), Decoding.Completeness.COMPLETE)),
            shapes,
            List.of());
  }

  private Decoding decode(int plane, PictureShape shape, List<byte[]> arrived) {
    return guarded(shape, () -> PlaneCoding.of(codec, plane).decode(shape, arrived));
  }

  private static Decoding guarded(PictureShape shape, Supplier<Decoding> work) {
    try {
      Decoding decoding = work.get();
      Failure failure = failure(decoding, shape);
      return failure == null ? decoding : Decoding.failed(shape, failure);
    } catch (Throwable thrown) {
      return Decoding.failed(shape, failure(thrown));
    }
  }

  private static @Nullable Failure failure(@Nullable Decoding decoding, PictureShape shape) {
    if (decoding == null) {
      return new Failure(Failure.NO_RESULT, "decode returned null");
    }
    Picture picture = decoding.picture();
    if (decoding.failure() != null) {
      return decoding.failure();
    }
    if (picture == null) {
      return new Failure(Failure.NO_RESULT, "decode returned no picture");
    }
    PictureShape found = PictureShape.of(picture);
    return found.equals(shape)
        ? null
        : new Failure(Failure.DECODE_SIZE, "decode returned " + found + "; accepted: " + shape);
  }

  private static Failure failure(Throwable thrown) {
    if (thrown instanceof CodecFailure own) {
      return own.failure();
    }
    if (thrown instanceof Unavailable unavailable) {
      throw unavailable;
    }
    if (thrown instanceof CancellationException cancelled) {
      throw cancelled;
    }
    if (thrown instanceof VirtualMachineError lack && !(thrown instanceof StackOverflowError)) {
      throw lack;
    }
    return new Failure(Failure.THREW, String.valueOf(thrown));
  }
}
