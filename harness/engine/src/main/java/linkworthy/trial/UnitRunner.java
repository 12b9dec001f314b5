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
import org.apache.commons.rng.UniformRandomProvider;

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
  record Rows(List<Trial> trials, List<Timing> timings) {}

  Rows run() {
    WorkUnit.Condition condition = unit.condition();
    if (condition == null) {
      return evaluate(Circumstances.clean(subject));
    }
    Impairment impairment = condition.at(subject.signal());
    double expected = impairment.equivalentNoiseVariance();
    if (impairment instanceof Impairment.OnSamples onSamples) {
      List<Picture> noisy = new ArrayList<>();
      for (Picture plane : subject.planes()) {
        noisy.add(onSamples.apply(plane, random(condition, noisy.size())));
      }
      return evaluate(
          new Circumstances(
              subject.coding().coded(noisy),
              Subject.memos(noisy),
              index -> false,
              expected,
              subject.meanSquaredError(noisy)));
    }
    Impairment.Losses losses = ((Impairment.OnPackets) impairment).losses(random(condition, 0));
    return evaluate(
        new Circumstances(subject.coded(), subject.memos(), losses, expected, Double.NaN));
  }

  /** Each plane has a stream of its own; that of luma does not depend on the other planes. */
  private UniformRandomProvider random(WorkUnit.Condition condition, int plane) {
    ImpairmentChoice choice = condition.impairment();
    return NoiseStreams.open(
        study.seed(),
        unit.entry().id(),
        choice.model().fingerprint(),
        choice.site(),
        condition.severity(),
        unit.replicate(),
        plane == 0 ? PURPOSE : PURPOSE + " on plane " + plane);
  }

  /**
   * What every codec of the unit meets.
   *
   * @param seen the planes that the encoder codes
   * @param memos encoders' work on each of them
   * @param realised noise variance of this realisation on the samples, or NaN where it follows from
   *     the packets lost
   */
  private record Circumstances(
      List<Picture> seen,
      List<Memo> memos,
      Impairment.Losses losses,
      double expected,
      double realised) {
    static Circumstances clean(Subject subject) {
      return new Circumstances(subject.coded(), subject.memos(), index -> false, 0, 0);
    }
  }

  private Rows evaluate(Circumstances circumstances) {
    List<Trial> trials = new ArrayList<>();
    List<Timing> timings = new ArrayList<>();
    for (Codec codec : study.codecs()) {
      long start = System.nanoTime();
      Encoding encoding = encode(codec, circumstances);
      long encoded = System.nanoTime();
      List<byte[]> arrived = arrived(encoding, circumstances.losses());
      PlaneCoding.Decoded decoding = subject.coding().decode(codec, subject.shapes(), arrived);
      long decoded = System.nanoTime();
      trials.add(trial(codec, circumstances, encoding, arrived.size(), decoding));
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
    return new Rows(trials, timings);
  }

  /** Encodes; an encoding of the clean picture serves all units that lose its packets. */
  private Encoding encode(Codec codec, Circumstances circumstances) {
    return circumstances
        .memos()
        .get(0)
        .once(
            new EncodingKey(codec.label()),
            Encoding.class,
            () -> subject.coding().encode(codec, circumstances.seen(), circumstances.memos()));
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
      PlaneCoding.Decoded decoding) {
    WorkUnit.Condition condition = unit.condition();
    int sentPackets = encoding.packets().size();
    int lostPackets = sentPackets - arrivedPackets;
    double realised =
        Double.isNaN(circumstances.realised())
            ? subject.signal().variance() * lostPackets / sentPackets
            : circumstances.realised();
    double mse = subject.meanSquaredError(decoding.planes());
    Link link = study.link();
    long sentBits = link.sentBits(sentPackets, encoding.payloadBits());
    Codec.Description description = codec.description();
    return new Trial(
        new TrialKey(study.seed(), unit, study.pictures(), codec, link).id(),
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
        measured("ssim", decoding.luma()),
        encoding.payloadBits(),
        sentBits,
        (double) sentBits / subject.picture().size(),
        sentPackets,
        lostPackets,
        decoding.completeness() == Decoding.Completeness.NOTHING);
  }

  private double measured(String measure, Picture decoded) {
    int at = study.measures().indexOf(measure);
    return at < 0 ? Double.NaN : subject.judges().get(at).of(decoded);
  }

  private record EncodingKey(String codec) {}
}
