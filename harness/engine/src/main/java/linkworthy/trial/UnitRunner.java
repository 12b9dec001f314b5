package linkworthy.trial;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
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
      return evaluate(new Circumstances(noisy, new Memo(), Passage.clear(realised), expected));
    }
    Passage passage = passage(impairment, random);
    return evaluate(new Circumstances(subject.picture(), subject.memo(), passage, expected));
  }

  /** The way of packets through an impairment of the coded stream. */
  private Passage passage(Impairment impairment, UniformRandomProvider random) {
    if (impairment instanceof Impairment.OnBits onBits) {
      return Passage.flipping(
          onBits.errors(random),
          onBits.frameCheck(),
          study.link().headerBytes(),
          subject.picture().peak());
    }
    double variance = subject.signal().variance();
    if (impairment instanceof Impairment.OnNodes onNodes) {
      return Passage.losingNodes(onNodes.failures(random), variance);
    }
    return Passage.losing(((Impairment.OnPackets) impairment).losses(random), variance);
  }

  /**
   * What every codec of the unit meets.
   *
   * @param seen the picture that the encoder sees
   * @param memo encoders' work on that picture
   * @param passage the way of its packets
   * @param expected equivalent noise variance, grey levels squared
   */
  private record Circumstances(Picture seen, Memo memo, Passage passage, double expected) {
    static Circumstances clean(Subject subject) {
      return new Circumstances(subject.picture(), subject.memo(), Passage.clear(0), 0);
    }
  }

  private Rows evaluate(Circumstances circumstances) {
    List<Trial> trials = new ArrayList<>();
    List<Timing> timings = new ArrayList<>();
    for (Codec codec : study.codecs()) {
      long start = System.nanoTime();
      Encoding encoding = encode(codec, circumstances);
      long encoded = System.nanoTime();
      Passage.Delivery delivery = circumstances.passage().deliver(encoding.packets());
      Decoding decoding = codec.decode(subject.shape(), delivery.arrived());
      long decoded = System.nanoTime();
      trials.add(trial(codec, circumstances, encoding, delivery, decoding));
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

  /** Encodes; an encoding of the clean picture serves all units that hurt its packets. */
  private Encoding encode(Codec codec, Circumstances circumstances) {
    return circumstances
        .memo()
        .once(
            new EncodingKey(codec.label()),
            Encoding.class,
            () -> codec.encode(circumstances.seen(), circumstances.memo()));
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
      Passage.Delivery delivery,
      Decoding decoding) {
    WorkUnit.Condition condition = unit.condition();
    int sentPackets = encoding.packets().size();
    double mse = Psnr.meanSquaredError(subject.picture(), decoding.picture());
    Link link = study.link();
    long sentBits = link.sentBits(sentPackets, encoding.payloadBits()) + delivery.checkBits();
    Codec.Description description = codec.description();
    return new Trial(
        new TrialKey(study.seed(), unit, study.pictures().longestSide(), codec, link).id(),
        unit.entry().id(),
        impairmentLabel(),
        condition == null ? "" : condition.impairment().site().id(),
        condition == null ? "" : condition.severity().axis(),
        condition == null ? Double.NaN : condition.severity().value(),
        circumstances.expected(),
        delivery.realisedNoiseVariance(),
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
        sentPackets - delivery.arrived().size(),
        decoding.completeness() == Decoding.Completeness.NOTHING,
        further(decoding.picture()));
  }

  private double measured(String measure, Picture decoded) {
    int at = study.measures().indexOf(measure);
    return at < 0 ? Double.NaN : subject.judges().get(at).of(decoded);
  }

  private Map<String, Double> further(Picture decoded) {
    Map<String, Double> figures = new LinkedHashMap<>();
    subject.furtherJudges().forEach((column, judge) -> figures.put(column, judge.of(decoded)));
    return figures;
  }

  private record EncodingKey(String codec) {}
}
