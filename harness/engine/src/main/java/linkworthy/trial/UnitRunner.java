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
import linkworthy.codec.Workload;
import linkworthy.corpus.Picture;
import linkworthy.link.Channel;
import linkworthy.noise.Impairment;
import linkworthy.noise.NoiseStreams;
import linkworthy.quality.Psnr;
import linkworthy.study.CodecChoice;
import linkworthy.study.ImpairmentChoice;
import linkworthy.study.NodeChoice;
import linkworthy.study.Study;
import org.apache.commons.rng.UniformRandomProvider;

/** Runs one work unit: draws its noise once and takes every codec through it. */
final class UnitRunner {
  private static final String PURPOSE = "impairment";
  private static final String RAW_HOP = "raw hop";

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
    Impairment impairment = condition.at(subject.signal());
    double expected = impairment.equivalentNoiseVariance();
    if (impairment instanceof Impairment.OnSamples onSamples) {
      List<Picture> noisy = new ArrayList<>();
      for (Picture plane : subject.planes()) {
        noisy.add(onSamples.apply(plane, random(condition, PURPOSE, noisy.size())));
      }
      return evaluate(
          new Circumstances(
              Seen.anew(subject.coding().coded(noisy)),
              Passage.clear(subject.meanSquaredError(noisy)),
              expected));
    }
    return evaluate(
        new Circumstances(
            Seen.clean(subject), passage(impairment, random(condition, PURPOSE, 0)), expected));
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
  private UniformRandomProvider random(WorkUnit.Condition condition, String purpose, int plane) {
    ImpairmentChoice choice = condition.impairment();
    return NoiseStreams.open(
        study.seed(),
        unit.entry().id(),
        choice.model().fingerprint(),
        choice.site(),
        condition.severity(),
        unit.replicate(),
        plane == 0 ? purpose : purpose + " on plane " + plane);
  }

  /**
   * What an encoder sees.
   *
   * @param planes as they are coded
   * @param memos encoders' work on each of them
   */
  private record Seen(List<Picture> planes, List<Memo> memos) {
    static Seen clean(Subject subject) {
      return new Seen(subject.coded(), subject.memos());
    }

    static Seen anew(List<Picture> planes) {
      return new Seen(planes, Subject.memos(planes));
    }
  }

  /**
   * What every codec of the unit meets.
   *
   * @param seen by an encoder in the camera
   * @param passage the way of its packets
   * @param expected equivalent noise variance, grey levels squared
   */
  private record Circumstances(Seen seen, Passage passage, double expected) {
    static Circumstances clean(Subject subject) {
      return new Circumstances(Seen.clean(subject), Passage.clear(0), 0);
    }
  }

  /** What encoders in helper nodes see: the planes after the raw hop, if that is hurt. */
  private Seen afterRawHop(Seen seen) {
    ImpairmentChoice hop = study.rawHop();
    if (hop == null || study.codecs().stream().noneMatch(choice -> choice.codec().hasHelpers())) {
      return seen;
    }
    WorkUnit.Condition condition = new WorkUnit.Condition(hop, hop.levels().get(0));
    Impairment.OnSamples impairment = (Impairment.OnSamples) condition.at(subject.signal());
    List<Picture> planes = new ArrayList<>();
    for (Picture plane : seen.planes()) {
      planes.add(impairment.apply(plane, random(condition, RAW_HOP, planes.size())));
    }
    return Seen.anew(planes);
  }

  private Rows evaluate(Circumstances circumstances) {
    List<Trial> trials = new ArrayList<>();
    List<Timing> timings = new ArrayList<>();
    List<Mishap> mishaps = new ArrayList<>();
    Seen afterRawHop = afterRawHop(circumstances.seen());
    for (CodecChoice choice : study.codecs()) {
      GuardedCodec codec =
          new GuardedCodec(
              choice.codec(),
              study.link().less(choice.protection().overheadBytes()),
              subject.coding());
      long start = System.nanoTime();
      GuardedCodec.Sent sent =
          encode(choice, codec, choice.codec().hasHelpers() ? afterRawHop : circumstances.seen());
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
  private GuardedCodec.Sent encode(CodecChoice choice, GuardedCodec codec, Seen seen) {
    Map<String, Object> settings = new HashMap<>(choice.codec().settings());
    settings.remove("label");
    return seen.memos()
        .get(0)
        .once(
            new EncodingKey(settings, choice.protection().overheadBytes()),
            GuardedCodec.Sent.class,
            () -> codec.encode(seen.planes(), seen.memos()));
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
        new TrialKey(study, unit, choice).id(),
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
        further(choice, encoding, outcome, decoding));
  }

  private double measured(String measure, Picture decoded) {
    int at = study.measures().indexOf(measure);
    return at < 0 ? Double.NaN : subject.judges().get(at).of(decoded);
  }

  private Map<String, Double> further(
      CodecChoice choice,
      Encoding encoding,
      Channel.Outcome outcome,
      PlaneCoding.Decoded decoding) {
    Map<String, Double> figures = new LinkedHashMap<>();
    subject
        .furtherJudges()
        .forEach((column, judge) -> figures.put(column, judge.of(decoding.luma())));
    NodeChoice node = study.node();
    if (node != null) {
      List<Workload> work =
          decoding.failure() == null
              ? subject.coding().workloads(choice.codec(), subject.shapes(), encoding.keep())
              : List.of();
      figures.putAll(NodeCosts.of(node, work, outcome.byNode()).figures());
    }
    return figures;
  }

  private record EncodingKey(Map<String, Object> settings, int overheadBytes) {}
}
