package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.codec.Codec;
import linkworthy.codec.CodecFailure;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.CodecReader;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Failure;
import linkworthy.codec.Memo;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.input.YamlNode;
import linkworthy.link.Importance;
import linkworthy.link.Packet;
import linkworthy.statistics.Cell;
import linkworthy.statistics.Cells;
import linkworthy.study.Study;
import linkworthy.study.StudyReader;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;

/** Codecs that fail, beside one that works, in a run that goes on. */
class FailingCodecsTest {
  private static final String STUDY =
      """
      name: failing
      pictures: {select: [cat], longest-side: 32}
      impairments:
        - {noise: gaussian, snr-db: 20}
        - {noise: burst-loss, loss-rate: 0.3, mean-burst: 2}
      codecs: [{transform: mean}]
      replicates: 3
      """;

  /** What goes wrong, and the word for it. */
  enum Fault {
    ENCODE_THROWS("threw"),
    ENCODE_OVERFLOWS("threw"),
    ENCODE_NULL("no-result"),
    ENCODE_SAYS_WHY("too-dull"),
    PACKET_TOO_LONG("packet-size"),
    DECODE_THROWS("threw"),
    DECODE_LINKS("threw"),
    DECODE_NULL("no-result"),
    DECODE_NULL_PICTURE("no-result"),
    DECODE_SMALL("decode-size"),
    DECODE_SAYS_WHY("too-dim");

    private final String word;

    Fault(String word) {
      this.word = word;
    }

    boolean isOfEncoder() {
      return compareTo(DECODE_THROWS) < 0;
    }
  }

  /** A codec of four packets that shows the wrong picture or none. */
  private record Failing(Fault fault) implements Codec {
    @Override
    public String label() {
      return "failing";
    }

    @Override
    public Description description() {
      return new Description("", "", "");
    }

    @Override
    public Map<String, Object> settings() {
      return new LinkedHashMap<>(Map.of("failing", fault.name()));
    }

    @Override
    public void check(PictureShape shape) {}

    private static int deeper(int n) {
      return n < 0 ? n : 1 + deeper(n + 1) % 7;
    }

    @Override
    @SuppressWarnings("NullAway")
    public Encoding encode(Picture picture, Memo memo) {
      return switch (fault) {
        case ENCODE_THROWS -> throw new ArrayIndexOutOfBoundsException("17");
        case ENCODE_OVERFLOWS -> new Encoding(List.of(), deeper(0));
        case ENCODE_NULL -> null;
        case ENCODE_SAYS_WHY -> throw new CodecFailure(new Failure("too-dull", "no contrast"));
        case PACKET_TOO_LONG -> new Encoding(packets(97), -1);
        default -> new Encoding(packets(96), -1);
      };
    }

    private static List<Packet> packets(int last) {
      List<Packet> packets = new ArrayList<>();
      for (int length : new int[] {1, 2, 3, last}) {
        packets.add(new Packet(new byte[length], Importance.REST));
      }
      return packets;
    }

    @Override
    @SuppressWarnings("NullAway")
    public Decoding decode(PictureShape shape, List<byte[]> arrived) {
      return switch (fault) {
        case DECODE_THROWS -> throw new IllegalStateException("line 1\nline 2");
        case DECODE_LINKS -> throw new NoClassDefFoundError("example/Missing");
        case DECODE_NULL -> null;
        case DECODE_NULL_PICTURE -> new Decoding(null, Decoding.Completeness.COMPLETE);
        case DECODE_SMALL ->
            new Decoding(new Picture(1, 1, 8, new int[1]), Decoding.Completeness.COMPLETE);
        default -> Decoding.failed(shape, new Failure("too-dim", "no light"));
      };
    }
  }

  private static Study study(Codec... more) {
    CodecReader reader =
        (entry, link) -> {
          List<Codec> all = new ArrayList<>(CodecFamilies.installed().read(entry, link));
          all.addAll(Arrays.asList(more));
          return all;
        };
    return StudyReader.read(YamlNode.parse("failing.yaml", STUDY), Path.of(""), reader);
  }

  private static List<Trial> run(Study study, List<Mishap> mishaps) {
    List<Trial> all = new ArrayList<>();
    Plan plan = Plan.of(study);
    int units =
        new LocalRunner(plan, 2, mishaps::add)
            .run(0, (unit, trials, timings) -> all.addAll(trials));
    assertThat(units).isEqualTo(plan.units());
    return all;
  }

  @ParameterizedTest
  @EnumSource
  void aFailureIsARowAndChangesNoOther(Fault fault) {
    List<Mishap> mishaps = new ArrayList<>();
    List<Trial> trials = run(study(new Failing(fault)), mishaps);
    List<Trial> failed = trials.stream().filter(t -> t.codec().equals("failing")).toList();
    assertThat(trials.stream().filter(t -> !t.codec().equals("failing")).toList())
        .isEqualTo(run(study(), new ArrayList<>()));
    assertThat(failed).hasSize(7);
    for (Trial trial : failed) {
      assertThat(trial.failure()).isEqualTo(fault.word);
      assertThat(trial.outage()).isTrue();
      assertThat(trial.psnrDb()).isBetween(1.0, 30.0).isEqualTo(failed.get(0).psnrDb());
      assertThat(trial.packetsSent()).isEqualTo(fault.isOfEncoder() ? 0 : 4);
      assertThat(trial.realisedNoiseVariance()).isNotNaN();
    }
    assertThat(mishaps).hasSize(7).allMatch(m -> m.codec().equals("failing"));
    assertThat(mishaps).allMatch(m -> m.failure().detail().lines().count() == 1);
    List<Cell> cells = Cells.of(trials);
    assertThat(cells.stream().filter(c -> c.codec().equals("failing")))
        .allMatch(c -> c.failures() == c.trials() && c.outageRate() == 1);
    assertThat(cells.stream().filter(c -> !c.codec().equals("failing")))
        .allMatch(c -> c.failures() == 0);
  }

  /** A codec whose check or encoder throws a given exception. */
  private record Throwing(RuntimeException inCheck, boolean checks) implements Codec {
    @Override
    public String label() {
      return "throwing";
    }

    @Override
    public Description description() {
      return new Description("", "", "");
    }

    @Override
    public Map<String, Object> settings() {
      return Map.of();
    }

    @Override
    public void check(PictureShape shape) {
      if (checks) {
        throw inCheck;
      }
    }

    @Override
    public Encoding encode(Picture picture, Memo memo) {
      throw inCheck;
    }

    @Override
    public Decoding decode(PictureShape shape, List<byte[]> arrived) {
      return Decoding.nothing(shape);
    }
  }

  @Test
  void aCheckThatThrowsIsBadInput() {
    Study study = study(new Throwing(new NullPointerException("no table"), true));
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> Plan.of(study))
        .withMessage(
            "picture 'cat': codec 'throwing' failed in check(): java.lang.NullPointerException: no"
                + " table");
  }

  @Test
  void aMachineThatRefusesEndsTheRun() {
    Study study = study(new Throwing(new Unavailable("disk full"), false));
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> run(study, new ArrayList<>()))
        .withMessage("disk full");
  }
}
