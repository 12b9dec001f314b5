package linkworthy.bench;

import java.nio.file.Path;
import java.util.List;
import linkworthy.codec.Codec;
import linkworthy.codec.CodecFamilies;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.Picture;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import linkworthy.noise.Impairment;
import linkworthy.noise.NoiseLibrary;
import linkworthy.noise.Severity;
import linkworthy.noise.SignalStatistics;
import linkworthy.noise.Site;
import linkworthy.study.StudyReader;
import linkworthy.trial.Plan;

/** What the benchmarks work on. */
final class Scenes {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);

  private Scenes() {}

  /** The shipped picture 'photographer', 512 x 512 samples of 8 bits. */
  static Picture photographer() {
    Manifest manifest = Manifest.shipped();
    return manifest.load(manifest.select(List.of("photographer")).get(0));
  }

  /** The plan of a study file with another number of replicates. */
  static Plan plan(Path study, int replicates) {
    YamlNode root = YamlNode.read(study).with("replicates", Integer.toString(replicates));
    return Plan.of(StudyReader.read(root, study.toAbsolutePath().resolveSibling("")));
  }

  /** A shipped noise model at 20 dB on a picture. */
  static Impairment noise(String model, Site site, Picture clean) {
    return NoiseLibrary.find(model)
        .at(new Severity(Severity.SNR_DB, 20), site, SignalStatistics.of(clean));
  }

  /**
   * A codec written as in a study, on one line: {@code {transform: pca, over: rows, keep: 16}}; its
   * packets carry 96 bytes.
   */
  static Codec codec(String entry) {
    return CodecFamilies.installed().read(YamlNode.parse("codec", entry), LINK).get(0);
  }
}
