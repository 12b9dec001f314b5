package linkworthy.bench;

import linkworthy.corpus.Picture;
import linkworthy.noise.Impairment;
import linkworthy.noise.NoiseStreams;
import linkworthy.noise.Severity;
import linkworthy.noise.Site;
import org.apache.commons.rng.UniformRandomProvider;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.State;

/** Drawing noise at 20 dB: for a picture of 512 x 512 samples, or for 10 000 packets. */
@State(Scope.Benchmark)
public class NoiseBenchmark {
  private static final int PACKETS = 10_000;

  private final Picture picture = Scenes.photographer();
  private final Impairment.OnSamples gaussian =
      (Impairment.OnSamples) Scenes.noise("gaussian", Site.SAMPLES, picture);
  private final Impairment.OnSamples saltAndPepper =
      (Impairment.OnSamples) Scenes.noise("salt-and-pepper", Site.SAMPLES, picture);
  private final Impairment.OnPackets burstLoss =
      (Impairment.OnPackets) Scenes.noise("burst-loss", Site.PACKETS, picture);
  private int replicate;

  private UniformRandomProvider nextStream(Site site) {
    Severity severity = new Severity(Severity.SNR_DB, 20);
    return NoiseStreams.open(1, "photographer", "bench", site, severity, replicate++, "bench");
  }

  @Benchmark
  public Picture gaussian() {
    return gaussian.apply(picture, nextStream(Site.SAMPLES));
  }

  @Benchmark
  public Picture saltAndPepper() {
    return saltAndPepper.apply(picture, nextStream(Site.SAMPLES));
  }

  @Benchmark
  public int packetLosses() {
    Impairment.Losses losses = burstLoss.losses(nextStream(Site.PACKETS));
    int lost = 0;
    for (int i = 0; i < PACKETS; i++) {
      lost += losses.lost(i) ? 1 : 0;
    }
    return lost;
  }
}
