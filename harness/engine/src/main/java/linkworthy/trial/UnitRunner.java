package linkworthy.trial;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.codec.Codec;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Failure;
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
import org.jspecify.annotations.Nullable;

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
        noisy.add(onSamples.apply(plane, random(condition, PURPOSE, noisy.size())));
      }
      return new Circumstances(
          Seen.anew(subject.coding().coded(noisy)),
          Passage.clear(subject.meanSquaredError(noisy)),
          expected);
    }
    return new Circumstances(
        Seen.clean(subject), passage(impairment, random(condition, PURPOSE, 0)), expected);
  }

  private Passage passage(Impairment impairment, UniformRandomProvider random) {
    double variance = subject.signal().variance();
    if (impairment instanceof Impairment.OnBits onBits) {
      return Passage.flipping(
          onBits.errors(random),
          onBits.checkBits(),
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

  private Rows evaluate(List<CodecChoice> codecs, Circumstances circumstances, Viewer viewer) {
    List<Trial> trials = new ArrayList<>();
    List<Timing> timings = new ArrayList<>();
    List<Mishap> mishaps = new ArrayList<>();
    Seen afterRawHop = afterRawHop(circumstances.seen());
    for (CodecChoice choice : codecs) {
      GuardedCodec codec =
          new GuardedCodec(
              choice.codec(), study.link().less(overheadBytes(choice)), subject.coding());
      long start = System.nanoTime();
      Seen seen = choice.codec().hasHelpers() ? afterRawHop : circumstances.seen();
      GuardedCodec.Sent sent = encode(choice, codec, seen);
      long encoded = System.nanoTime();
      Passage.Crossing crossing = circumstances.passage().open();
      Channel.Outcome outcome =
          new Channel(study.link(), choice.protection()).send(sent.encoding().packets(), crossing);
      boolean intact = crossing.isClear() || isIntact(sent.encoding(), outcome.payloads());
      Judged judged =
          intact
              ? judgeIntact(choice, codec, seen, sent)
              : judge(codec.decode(subject.shapes(), sent, outcome.payloads()));
      long decoded = System.nanoTime();
      trials.add(
          trial(
              choice,
              circumstances.expected(),
              crossing.realisedNoiseVariance(),
              sent.encoding(),
              outcome,
              judged));
      viewer.see(seen.planes().get(0), judged.luma());
      if (judged.failure() != null) {
        mishaps.add(new Mishap(choice.label(), unit.entry().id(), judged.failure()));
      }
      timings.add(
          Timing.of(unit, choice.label(), (encoded - start) / 1e6, (decoded - encoded) / 1e6));
    }
    return new Rows(trials, timings, mishaps);
  }

  /**
   * Encodes; an encoding of the clean picture serves all units that hurt its packets, and all
   * protections that leave packets of the same size.
   */
  private GuardedCodec.Sent encode(CodecChoice choice, GuardedCodec codec, Seen seen) {
    return seen.memos()
        .get(0)
        .once(
            encodingKey(choice),
            GuardedCodec.Sent.class,
            () -> codec.encode(seen.planes(), seen.memos()));
  }

  /**
   * Decodes and judges all that was sent, as it was sent: that gives the same figures every time,
   * so it is done once for each encoding.
   */
  private Judged judgeIntact(
      CodecChoice choice, GuardedCodec codec, Seen seen, GuardedCodec.Sent sent) {
    return seen.memos()
        .get(0)
        .once(
            new IntactKey(encodingKey(choice)),
            Judged.class,
            () -> judge(codec.decodeAll(subject.shapes(), sent)));
  }

  private static boolean isIntact(Encoding encoding, List<byte[]> arrived) {
    boolean intact = arrived.size() == encoding.packets().size();
    for (int i = 0; intact && i < arrived.size(); i++) {
      intact = arrived.get(i) == encoding.packets().get(i).payload();
    }
    return intact;
  }

  private Judged judge(PlaneCoding.Decoded decoding) {
    Map<String, Double> further = new LinkedHashMap<>();
    subject
        .furtherJudges()
        .forEach((column, judge) -> further.put(column, judge.of(decoding.luma())));
    int ssim = study.measures().indexOf("ssim");
    return new Judged(
        decoding.luma(),
        subject.meanSquaredError(decoding.planes()),
        ssim < 0 ? Double.NaN : subject.judges().get(ssim).of(decoding.luma()),
        further,
        decoding.completeness() == Decoding.Completeness.NOTHING,
        decoding.failure());
  }

  /** The figures of a decoded picture. */
  private record Judged(
      Picture luma,
      double mse,
      double ssim,
      Map<String, Double> further,
      boolean outage,
      @Nullable Failure failure) {}

  private Trial trial(
      CodecChoice choice,
      double expectedVariance,
      double realisedVariance,
      Encoding encoding,
      Channel.Outcome outcome,
      Judged judged) {
    Codec.Description description = choice.codec().description();
    return new Trial(
        new TrialKey(study, unit, choice).id(),
        unit.entry().id(),
        unit.impairment(),
        unit.actsOn(),
        unit.axis(),
        unit.severity(),
        expectedVariance,
        realisedVariance,
        unit.condition() == null
            ? Double.NaN
            : 10 * StrictMath.log10(subject.signal().power() / expectedVariance),
        choice.label(),
        description.transform(),
        description.over(),
        encoding.keep(),
        encoding.step().isEmpty() ? description.step() : encoding.step(),
        unit.replicate(),
        judged.mse(),
        Psnr.psnrDb(judged.mse(), subject.picture().peak()),
        judged.ssim(),
        outcome.payloadBits(),
        outcome.sentBits(),
        (double) outcome.sentBits() / subject.picture().size(),
        outcome.packetsSent(),
        outcome.packetsLost(),
        judged.outage(),
        judged.failure() == null ? "" : judged.failure().word(),
        further(choice, encoding, outcome, judged));
  }

  private Map<String, Double> further(
      CodecChoice choice, Encoding encoding, Channel.Outcome outcome, Judged judged) {
    Map<String, Double> figures = new LinkedHashMap<>(judged.further());
    NodeChoice node = study.node();
    if (node != null) {
      List<Workload> work =
          judged.failure() == null
              ? subject.coding().workloads(choice.codec(), subject.shapes(), encoding.keep())
              : List.of();
      figures.putAll(NodeCosts.of(node, work, outcome.byNode()).figures());
    }
    return figures;
  }

  /** Bytes of each payload that protection takes from the codec. */
  private int overheadBytes(CodecChoice choice) {
    return choice.protection().overheadBytes(study.link().payloadBytes());
  }

  private EncodingKey encodingKey(CodecChoice choice) {
    Map<String, Object> settings = new HashMap<>(choice.codec().settings());
    settings.remove("label");
    return new EncodingKey(settings, overheadBytes(choice));
  }

  private record EncodingKey(Map<String, Object> settings, int overheadBytes) {}

  private record IntactKey(EncodingKey encoding) {}
}
