package linkworthy.trial;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.codec.Codec;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Memo;
import linkworthy.corpus.Picture;
import linkworthy.link.Channel;
import linkworthy.noise.Impairment;
import linkworthy.noise.NoiseStreams;
import linkworthy.quality.Psnr;
import linkworthy.study.CodecChoice;
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

  /** What a unit gives: a trial and its times for each codec. */
  record Rows(List<Trial> trials, List<Timing> timings, List<Mishap> mishaps) {}

  /** Looks at the luma planes of each trial: as its encoder saw it, and as it was decoded. */
  interface Viewer {
    void see(Picture seen, Picture decoded);
  }

  /** Runs every codec of the study, in the study's order. */
  Rows run() {
    return run(study.codecs(), (seen, decoded) -> {});
  }

  /** Runs some of the study's codecs. */
  Rows run(List<CodecChoice> codecs, Viewer viewer) {
    return evaluate(codecs, circumstances(), viewer);
  }

  private Circumstances circumstances() {
    WorkUnit.Condition condition = unit.condition();
    if (condition == null) {
      return Circumstances.clean(subject);
    }
    Impairment impairment = condition.at(subject.signal());
    double expected = impairment.equivalentNoiseVariance();
    if (impairment instanceof Impairment.OnSamples onSamples) {
      List<Picture> noisy = new ArrayList<>();
      for (Picture plane : subject.planes()) {
        noisy.add(onSamples.apply(plane, random(condition, noisy.size())));
      }
      return new Circumstances(
          subject.coding().coded(noisy),
          Subject.memos(noisy),
          Passage.clear(subject.meanSquaredError(noisy)),
          expected);
    }
    return new Circumstances(
        subject.coded(), subject.memos(), passage(impairment, random(condition, 0)), expected);
  }

  private Passage passage(Impairment impairment, UniformRandomProvider random) {
    double variance = subject.signal().variance();
    if (impairment instanceof Impairment.OnBits onBits) {
      return Passage.flipping(
          onBits.errors(random),
          onBits.frameCheck(),
          study.link().headerBytes(),
          subject.picture().peak());
    }
    if (impairment instanceof Impairment.OnNodes onNodes) {
      return Passage.failing(onNodes.failures(random), variance);
    }
    return Passage.losing(((Impairment.OnPackets) impairment).losses(random), variance);
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
   * @param passage the way of its packets
   * @param expected equivalent noise variance, grey levels squared
   */
  private record Circumstances(
      List<Picture> seen, List<Memo> memos, Passage passage, double expected) {
    static Circumstances clean(Subject subject) {
      return new Circumstances(subject.coded(), subject.memos(), Passage.clear(0), 0);
    }
  }

  private Rows evaluate(List<CodecChoice> codecs, Circumstances circumstances, Viewer viewer) {
    List<Trial> trials = new ArrayList<>();
    List<Timing> timings = new ArrayList<>();
    List<Mishap> mishaps = new ArrayList<>();
    for (CodecChoice choice : codecs) {
      GuardedCodec codec =
          new GuardedCodec(
              choice.codec(),
              study.link().less(choice.protection().overheadBytes()),
              subject.coding());
      long start = System.nanoTime();
      GuardedCodec.Sent sent = encode(choice, codec, circumstances);
      long encoded = System.nanoTime();
      Passage.Crossing crossing = circumstances.passage().open();
      Channel.Outcome outcome =
          new Channel(study.link(), choice.protection()).send(sent.encoding().packets(), crossing);
      PlaneCoding.Decoded decoding = codec.decode(subject.shapes(), sent, outcome.payloads());
      long decoded = System.nanoTime();
      trials.add(
          trial(
              choice,
              circumstances.expected(),
              crossing.realisedNoiseVariance(),
              sent.encoding(),
              outcome,
              decoding));
      viewer.see(circumstances.seen().get(0), decoding.luma());
      if (decoding.failure() != null) {
        mishaps.add(new Mishap(choice.label(), unit.entry().id(), decoding.failure()));
      }
      timings.add(
          new Timing(
              unit.entry().id(),
              impairmentLabel(),
              unit.condition() == null ? Double.NaN : unit.condition().severity().value(),
              unit.replicate(),
              choice.label(),
              (encoded - start) / 1e6,
              (decoded - encoded) / 1e6));
    }
    return new Rows(trials, timings, mishaps);
  }

  /**
   * Encodes; an encoding of the clean picture serves all units that hurt its packets, and all
   * protections that leave packets of the same size.
   */
  private GuardedCodec.Sent encode(
      CodecChoice choice, GuardedCodec codec, Circumstances circumstances) {
    Map<String, Object> settings = new HashMap<>(choice.codec().settings());
    settings.remove("label");
    return circumstances
        .memos()
        .get(0)
        .once(
            new EncodingKey(settings, choice.protection().overheadBytes()),
            GuardedCodec.Sent.class,
            () -> codec.encode(circumstances.seen(), circumstances.memos()));
  }

  private String impairmentLabel() {
    return unit.condition() == null
        ? ImpairmentChoice.CLEAN
        : unit.condition().impairment().label();
  }

  private Trial trial(
      CodecChoice choice,
      double expectedVariance,
      double realisedVariance,
      Encoding encoding,
      Channel.Outcome outcome,
      PlaneCoding.Decoded decoding) {
    WorkUnit.Condition condition = unit.condition();
    double mse = subject.meanSquaredError(decoding.planes());
    Codec.Description description = choice.codec().description();
    return new Trial(
        new TrialKey(study.seed(), unit, study.pictures(), choice, study.link()).id(),
        unit.entry().id(),
        impairmentLabel(),
        condition == null ? "" : condition.impairment().site().id(),
        condition == null ? "" : condition.severity().axis(),
        condition == null ? Double.NaN : condition.severity().value(),
        expectedVariance,
        realisedVariance,
        condition == null
            ? Double.NaN
            : 10 * StrictMath.log10(subject.signal().power() / expectedVariance),
        choice.label(),
        description.transform(),
        description.over(),
        encoding.keep(),
        encoding.step().isEmpty() ? description.step() : encoding.step(),
        unit.replicate(),
        mse,
        Psnr.psnrDb(mse, subject.picture().peak()),
        measured("ssim", decoding.luma()),
        outcome.payloadBits(),
        outcome.sentBits(),
        (double) outcome.sentBits() / subject.picture().size(),
        outcome.packetsSent(),
        outcome.packetsLost(),
        decoding.completeness() == Decoding.Completeness.NOTHING,
        decoding.failure() == null ? "" : decoding.failure().word(),
        further(decoding.luma()));
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

  private record EncodingKey(Map<String, Object> settings, int overheadBytes) {}
}
