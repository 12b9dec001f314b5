package linkworthy.noise;

import java.util.ArrayList;
import java.util.BitSet;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.Set;
import java.util.stream.IntStream;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import linkworthy.input.Kind;
import org.apache.commons.rng.UniformRandomProvider;
import org.jspecify.annotations.Nullable;

/**
 * Replays recorded fates of packets. A model file names the record by {@code trace}: one fate a
 * line, 1 lost and 0 delivered, nothing else (see {@link #read}). Each realisation starts at a
 * place of its own, drawn uniformly; after the last fate the first follows. So the loss rate is
 * that of the record in the long run, and packets that meet the seam see a join that was never
 * measured.
 *
 * <p>With a share q of the record lost and picture variance V the equivalent noise variance is q V,
 * in grey levels squared. A record has one severity: axis {@code as-recorded}, value 1.
 */
public final class RecordedTrace implements NoiseProcess {
  /** The one severity: as it was recorded, value 1. */
  public static final String AS_RECORDED = "as-recorded";

  private static final String TRACE = "trace";
  private static final int MAX_SHOWN = 20;

  private final @Nullable String content;
  private final BitSet lost;
  private final int length;

  /** The process without a record, as the registry has it; it cannot be drawn from. */
  public RecordedTrace() {
    content = null;
    lost = new BitSet();
    length = 0;
  }

  private RecordedTrace(String content) {
    this.content = content;
    List<Boolean> fates = read(content);
    this.length = fates.size();
    this.lost = new BitSet(length);
    IntStream.range(0, length).filter(fates::get).forEach(lost::set);
  }

  /**
   * Whether each packet was lost, from a text: one a line, 0 or 1; spaces around it do not count,
   * and the last line may lack its end.
   *
   * @throws BadInput if a line holds anything else, or there is none; with the line's number
   */
  static List<Boolean> read(String content) {
    List<String> lines = content.lines().map(String::strip).toList();
    if (lines.isEmpty()) {
      throw new BadInput("the trace is empty; accepted: lines of 0 (delivered) or 1 (lost)");
    }
    List<Boolean> lost = new ArrayList<>(lines.size());
    for (int i = 0; i < lines.size(); i++) {
      String line = lines.get(i);
      if (!line.equals("0") && !line.equals("1")) {
        String shown = line.replaceAll("\\p{Cntrl}", "?");
        shown = shown.length() > MAX_SHOWN ? shown.substring(0, MAX_SHOWN) + "..." : shown;
        throw new BadInput(
            "line %d of the trace is '%s'; accepted: 0 (delivered) or 1 (lost)"
                .formatted(i + 1, shown));
      }
      lost.add(line.equals("1"));
    }
    return lost;
  }

  @Override
  public String id() {
    return "trace";
  }

  @Override
  public int revision() {
    return 1;
  }

  @Override
  public String summary() {
    return "recorded fates of packets replayed from a random place on, round and round;"
        + " equivalent variance q V for a share q lost and picture variance V";
  }

  @Override
  public List<Site> sites() {
    return List.of(Site.PACKETS);
  }

  @Override
  public Map<String, Double> parameters() {
    return Map.of();
  }

  @Override
  public Set<String> settingKeys() {
    return Set.of(TRACE);
  }

  @Override
  public Set<String> fileKeys() {
    return Set.of(TRACE);
  }

  @Override
  public Map<String, String> settings() {
    return content == null ? Map.of() : Map.of(TRACE, content);
  }

  @Override
  public NoiseProcess with(Map<String, String> settings) {
    String given = settings.get(TRACE);
    return given == null ? new RecordedTrace() : new RecordedTrace(given.replace("\r\n", "\n"));
  }

  @Override
  public List<Key> keys() {
    return List.of(
        SeverityChecks.axis(AS_RECORDED, 1, 1, "the record as it is"),
        Key.optional(
            TRACE,
            Kind.Text.any("the name of a file beside the model"),
            "no record",
            "a line for each packet, 1 lost, 0 delivered"));
  }

  @Override
  public Set<String> axes() {
    return Set.of(AS_RECORDED);
  }

  @Override
  public void checkParameters(Map<String, Double> parameters, Site site) {
    check(new Severity(AS_RECORDED, 1), parameters, site);
  }

  @Override
  public void check(Severity severity, Map<String, Double> parameters, Site site) {
    SeverityChecks.common(this, severity, parameters, site);
    SeverityChecks.inRange(severity.value(), 1, 1, AS_RECORDED);
    if (length == 0) {
      throw new BadInput("trace needs a record; accepted: a model file with the key trace");
    }
  }

  @Override
  public Impairment at(
      Severity severity, Map<String, Double> parameters, Site site, SignalStatistics signal) {
    check(severity, parameters, site);
    return new Replay((double) lost.cardinality() / length * signal.variance(), lost, length);
  }

  @Override
  public boolean equals(@Nullable Object other) {
    return other instanceof RecordedTrace trace && Objects.equals(content, trace.content);
  }

  @Override
  public int hashCode() {
    return Objects.hashCode(content);
  }

  private record Replay(double equivalentNoiseVariance, BitSet lost, int length)
      implements Impairment.OnPackets {
    @Override
    public Impairment.Losses losses(UniformRandomProvider random) {
      int start = random.nextInt(length);
      return index -> lost.get((int) (((long) start + index) % length));
    }
  }
}
