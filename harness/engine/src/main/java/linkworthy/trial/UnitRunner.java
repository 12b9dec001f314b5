package linkworthy.trial;

import java.util.ArrayList;
import java.util.List;
import linkworthy.codec.Codec;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Memo;
import linkworthy.corpus.Picture;
import linkworthy.link.Link;
import linkworthy.noise.Impairment;
import linkworthy.noise.NoiseStreams;
import linkworthy.quality.Psnr;
import linkworthy.study.ImpairmentChoice;
import linkworthy.study.Study;

/** Runs one work unit: draws its noise once and takes every codec through it. */
final class UnitRunner {
  private static final String PURPOSE = "impairment";

  private final Study study;
  private final Subject subject;
  private final WorkUnit unit;

  UnitRunner(Study study, Subject subject, WorkUnit unit) {
    this.study = study;
    this.subject = subject;
    this.unit = unit;
  }

  /** What a unit gives: a trial and its times for each codec of the study, in the study's order. */
  record Rows(List<Trial> trials, List<Timing> timings, List<Mishap> mishaps) {}

  Rows run() {
    WorkUnit.Condition condition = unit.condition();
    if (condition == null) {
      return evaluate(Circumstances.clean(subject));
    }
    ImpairmentChoice choice = condition.impairment();
    Impairment impairment = condition.at(subject.signal());
    var random =
        NoiseStreams.open(
            study.seed(),
            unit.entry().id(),
            choice.model().fingerprint(),
            choice.site(),
            condition.severity(),
            unit.replicate(),
            PURPOSE);
    double expected = impairment.equivalentNoiseVariance();
    if (impairment instanceof Impairment.OnSamples onSamples) {
      Picture noisy = onSamples.apply(subject.picture(), random);
      double realised = Psnr.meanSquaredError(subject.picture(), noisy);
      return evaluate(new Circumstances(noisy, new Memo(), index -> false, expected, realised));
    }
    Impairment.Losses losses = ((Impairment.OnPackets) impairment).losses(random);
    return evaluate(
        new Circumstances(subject.picture(), subject.memo(), losses, expected, Double.NaN));
  }

  /**
   * What every codec of the unit meets.
   *
   * @param seen the picture that the encoder sees
   * @param memo encoders' work on that picture
   * @param realised noise variance of this realisation on the samples, or NaN where it follows from
   *     the packets lost
   */
  private record Circumstances(
      Picture seen, Memo memo, Impairment.Losses losses, double expected, double realised) {
    static Circumstances clean(Subject subject) {
      return new Circumstances(subject.picture(), subject.memo(), index -> false, 0, 0);
    }
  }

  private Rows evaluate(Circumstances circumstances) {
    List<Trial> trials = new ArrayList<>();
    List<Timing> timings = new ArrayList<>();
    List<Mishap> mishaps = new ArrayList<>();
    for (Codec codec : study.codecs()) {
      long start = System.nanoTime();
      GuardedCodec guarded = new GuardedCodec(codec, study.link());
      GuardedCodec.Sent sent = encode(guarded, circumstances);
      long encoded = System.nanoTime();
      List<byte[]> arrived = arrived(sent.encoding(), circumstances.losses());
      Decoding decoding = guarded.decode(subject.shape(), sent, arrived);
      long decoded = System.nanoTime();
      trials.add(trial(codec, circumstances, sent.encoding(), arrived.size(), decoding));
      if (decoding.failure() != null) {
        mishaps.add(new Mishap(codec.label(), unit.entry().id(), decoding.failure()));
      }
      timings.add(
          new Timing(
              unit.entry().id(),
              impairmentLabel(),
              unit.condition() == null ? Double.NaN : unit.condition().severity().value(),
              unit.replicate(),
              codec.label(),
              (encoded - start) / 1e6,
              (decoded - encoded) / 1e6));
    }
    return new Rows(trials, timings, mishaps);
  }

  /** Encodes; an encoding of the clean picture serves all units that lose its packets. */
  private GuardedCodec.Sent encode(GuardedCodec codec, Circumstances circumstances) {
    return circumstances
        .memo()
        .once(
            new EncodingKey(codec.label()),
            GuardedCodec.Sent.class,
            () -> codec.encode(circumstances.seen(), circumstances.memo()));
  }

  private static List<byte[]> arrived(Encoding encoding, Impairment.Losses losses) {
    List<byte[]> arrived = new ArrayList<>();
    for (int i = 0; i < encoding.packets().size(); i++) {
      if (!losses.lost(i)) {
        arrived.add(encoding.packets().get(i).payload());
      }
    }
    return arrived;
  }

  private String impairmentLabel() {
    return unit.condition() == null
        ? ImpairmentChoice.CLEAN
        : unit.condition().impairment().label();
  }

  private Trial trial(
      Codec codec,
      Circumstances circumstances,
      Encoding encoding,
      int arrivedPackets,
      Decoding decoding) {
    WorkUnit.Condition condition = unit.condition();
    int sentPackets = encoding.packets().size();
    int lostPackets = sentPackets - arrivedPackets;
    double realised =
        Double.isNaN(circumstances.realised())
            ? subject.signal().variance() * lostPackets / Math.max(1, sentPackets)
            : circumstances.realised();
    double mse = Psnr.meanSquaredError(subject.picture(), decoding.picture());
    Link link = study.link();
    long sentBits = link.sentBits(sentPackets, encoding.payloadBits());
    Codec.Description description = codec.description();
    return new Trial(
        new TrialKey(study.seed(), unit, study.pictures().longestSide(), codec, link).id(),
        unit.entry().id(),
        impairmentLabel(),
        condition == null ? "" : condition.impairment().site().id(),
        condition == null ? "" : condition.severity().axis(),
        condition == null ? Double.NaN : condition.severity().value(),
        circumstances.expected(),
        realised,
        condition == null
            ? Double.NaN
            : 10 * StrictMath.log10(subject.signal().power() / circumstances.expected()),
        codec.label(),
        description.transform(),
        description.over(),
        encoding.keep(),
        description.step(),
        unit.replicate(),
        mse,
        Psnr.psnrDb(mse, subject.picture().peak()),
        measured("ssim", decoding.picture()),
        encoding.payloadBits(),
        sentBits,
        (double) sentBits / subject.picture().size(),
        sentPackets,
        lostPackets,
        decoding.completeness() == Decoding.Completeness.NOTHING,
        decoding.failure() == null ? "" : decoding.failure().word());
  }

  private double measured(String measure, Picture decoded) {
    int at = study.measures().indexOf(measure);
    return at < 0 ? Double.NaN : subject.judges().get(at).of(decoded);
  }

  private record EncodingKey(String codec) {}
}
