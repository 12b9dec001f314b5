package linkworthy.bench;

import java.util.List;
import linkworthy.codec.Codec;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Memo;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.Param;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;

/**
 * Encoding and decoding the picture 'photographer' (512 x 512). Encoding starts from nothing, so a
 * PCA codec finds its basis anew each time; in a study, codecs that share a basis share that work.
 */
@State(Scope.Benchmark)
public class CodecBenchmark {
  private final Picture picture = Scenes.photographer();

  /** The codec, as in a study. */
  @Param({
    "{transform: pca, over: rows, keep: 16}",
    "{transform: pca, over: blocks, keep: 16}",
    "{transform: dct, over: blocks, keep: 16}",
    "{transform: mean, over: rows, step: 16}"
  })
  public String entry = "{transform: mean, over: rows, step: 16}";

  private Codec codec = Scenes.codec(entry);
  private List<byte[]> packets = List.of();

  /** Reads the codec and encodes the picture once for the decoder. */
  @Setup
  public void prepare() {
    codec = Scenes.codec(entry);
    packets = encode().payloads();
  }

  @Benchmark
  public Encoding encode() {
    return codec.encode(picture, new Memo());
  }

  @Benchmark
  public Decoding decode() {
    return codec.decode(PictureShape.of(picture), packets);
  }
}
