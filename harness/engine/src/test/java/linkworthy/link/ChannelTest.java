package linkworthy.link;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatCode;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.junit.jupiter.api.Assertions.assertTimeoutPreemptively;

import java.time.Duration;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.EnumSet;
import java.util.List;
import java.util.Random;
import java.util.Set;
import java.util.function.IntPredicate;
import java.util.stream.IntStream;
import java.util.stream.Stream;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.MethodSource;

class ChannelTest {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);
  private static final Set<Importance> ALL = EnumSet.allOf(Importance.class);

  private static Protection.Rule rule(
      Set<Importance> only, int repeat, Protection.@Nullable ErasureCode code, int retransmit) {
    return new Protection.Rule(only, repeat, code, retransmit, 5);
  }

  private static Protection all(int repeat, Protection.@Nullable ErasureCode code, int retransmit) {
    return new Protection(List.of(rule(ALL, repeat, code, retransmit)));
  }

  private static Protection.ErasureCode code(int n, int k, int depth) {
    return new Protection.ErasureCode(n, k, depth);
  }

  private static Protection.ErasureCode correcting(int n, int k, int depth) {
    return new Protection.ErasureCode(n, k, depth, true);
  }

  /** One protection of each kind, combinations, and one that differs by class. */
  static Stream<Protection> protections() {
    return Stream.of(
        Protection.NONE,
        all(2, null, 0),
        all(1, null, 3),
        all(3, null, 2),
        all(1, code(12, 8, 4), 0),
        all(1, code(12, 8, 1), 0),
        all(1, code(255, 223, 1), 0),
        all(1, code(5, 1, 3), 0),
        all(2, code(10, 8, 2), 1),
        all(1, correcting(12, 8, 4), 0),
        all(1, correcting(255, 223, 1), 0),
        all(2, correcting(10, 8, 2), 1),
        new Protection(
            List.of(new Protection.Rule(ALL, 2, code(12, 8, 2), new HammingCode(8), 1, 5))),
        new Protection(
            List.of(
                rule(EnumSet.of(Importance.HEADER), 3, null, 0),
                rule(EnumSet.of(Importance.BASIS, Importance.FIRST), 1, code(12, 8, 2), 0))),
        new Protection(
            List.of(
                rule(EnumSet.of(Importance.HEADER), 1, code(6, 2, 1), 1),
                rule(EnumSet.of(Importance.REST), 1, code(9, 8, 3), 0))));
  }

  /** Packets of all classes and of different lengths, no two alike. */
  private static List<Packet> packets(int count, long seed) {
    Random random = new Random(seed);
    List<Packet> packets = new ArrayList<>();
    for (int i = 0; i < count; i++) {
      byte[] payload = new byte[4 + random.nextInt(85)];
      random.nextBytes(payload);
      payload[0] = (byte) i;
      payload[1] = (byte) (i >> 8);
      Importance importance =
          i < 2 ? Importance.HEADER : List.of(Importance.values()).get(1 + random.nextInt(3));
      packets.add(new Packet(payload, importance));
    }
    return packets;
  }

  private static List<byte[]> payloads(List<Packet> packets) {
    return packets.stream().map(Packet::payload).toList();
  }

  /** Air that writes down what is sent; whether transmission t arrives is given. */
  private static final class Recorder implements Channel.Air {
    private final List<byte[]> sent = new ArrayList<>();
    private final List<byte[]> arrived = new ArrayList<>();
    private final IntPredicate lost;

    Recorder(IntPredicate lost) {
      this.lost = lost;
    }

    @Override
    public byte @Nullable [] carry(int index, int node, byte[] payload) {
      assertThat(index).as("one after the other").isEqualTo(sent.size());
      sent.add(payload);
      if (lost.test(index)) {
        return null;
      }
      arrived.add(payload);
      return payload;
    }
  }

  private static void assertSameBytes(List<byte[]> found, List<byte[]> expected) {
    assertThat(found.toArray(new byte[0][])).isDeepEqualTo(expected.toArray(new byte[0][]));
  }

  @Test
  void withoutProtectionThePacketsThemselvesAreSent() {
    List<Packet> packets = packets(20, 1);
    Recorder air = new Recorder(t -> t % 3 == 0);
    Channel.Outcome outcome = new Channel(LINK, Protection.NONE).send(packets, air);
    assertSameBytes(air.sent, payloads(packets));
    assertSameBytes(outcome.payloads(), air.arrived);
    assertThat(outcome.packetsSent()).isEqualTo(20);
    assertThat(outcome.packetsLost()).isEqualTo(7);
  }

  /** Clear air is an outcome like any other, reached without looking at a payload. */
  @ParameterizedTest
  @MethodSource("protections")
  void clearAirIsCountedLikeAirThatLosesNothing(Protection protection) {
    Channel.Air clear =
        new Channel.Air() {
          @Override
          public byte[] carry(int index, int node, byte[] payload) {
            return payload;
          }

          @Override
          public boolean isClear() {
            return true;
          }
        };
    for (Protection each : List.of(protection, Protection.NONE)) {
      List<Packet> packets = packets(70, 3);
      Channel.Outcome expected = new Channel(LINK, each).send(packets, new Recorder(t -> false));
      Channel.Outcome found = new Channel(LINK, each).send(packets, clear);
      assertThat(found).usingRecursiveComparison().ignoringFields("payloads").isEqualTo(expected);
      assertSameBytes(found.payloads(), expected.payloads());
    }
  }

  /** The bits counted are the bits that were produced, whatever the protection and the losses. */
  @ParameterizedTest
  @MethodSource("protections")
  void everyBitIsCounted(Protection protection) {
    for (int percent : new int[] {0, 10, 50, 100}) {
      Random random = new Random(percent);
      int[] acknowledged = {0};
      List<Packet> packets = packets(150, 2);
      Recorder air = new Recorder(t -> random.nextInt(100) < percent);
      Channel.Outcome outcome = new Channel(LINK, protection).send(packets, air);
      long payloadBits = air.sent.stream().mapToLong(p -> 8L * p.length).sum();
      Set<Importance> confirming = EnumSet.noneOf(Importance.class);
      protection.rules().stream()
          .filter(r -> r.retransmit() > 0)
          .forEach(r -> confirming.addAll(r.only()));
      if (confirming.equals(ALL)) {
        acknowledged[0] = air.arrived.size();
      } else if (!confirming.isEmpty()) {
        acknowledged[0] = (int) air.arrived.stream().filter(p -> (p[0] & 0xFF) >> 5 == 1).count();
      }
      assertThat(outcome.packetsSent()).isEqualTo(air.sent.size());
      assertThat(outcome.packetsLost()).isEqualTo(air.sent.size() - air.arrived.size());
      assertThat(outcome.payloadBits()).isEqualTo(payloadBits);
      assertThat(outcome.sentBits())
          .isEqualTo(payloadBits + 8L * 23 * air.sent.size() + 8L * 5 * acknowledged[0]);
    }
  }

  @ParameterizedTest
  @MethodSource("protections")
  void nothingLostGivesThePacketsInOrder(Protection protection) {
    for (int count : new int[] {1, 2, 31, 32, 33, 150}) {
      List<Packet> packets = packets(count, count);
      Recorder air = new Recorder(t -> false);
      Channel.Outcome outcome = new Channel(LINK, protection).send(packets, air);
      assertSameBytes(outcome.payloads(), payloads(packets));
      assertThat(air.sent)
          .allSatisfy(p -> assertThat(p.length).isLessThanOrEqualTo(protection.leastPayload(88)));
    }
  }

  /** Whatever comes out went in, once; what arrived by itself is always among it. */
  @ParameterizedTest
  @MethodSource("protections")
  void lossesOnlyTakeAway(Protection protection) {
    for (int percent : new int[] {5, 20, 60}) {
      Random random = new Random(percent);
      List<Packet> packets = packets(150, 3);
      Channel.Outcome outcome =
          new Channel(LINK, protection)
              .send(packets, new Recorder(t -> random.nextInt(100) < percent));
      List<String> sent = payloads(packets).stream().map(Arrays::toString).toList();
      List<String> found = outcome.payloads().stream().map(Arrays::toString).toList();
      assertThat(found).doesNotHaveDuplicates().isSubsetOf(sent);
      if (!protection.isNone() && percent == 5) {
        assertThat(found.size()).isGreaterThan(packets.size() * 95 / 100);
      }
    }
  }

  /** Copies follow at once; tries too, until one arrives: 1 + 2 + 3 transmissions here. */
  @Test
  void orderOfCopiesAndTries() {
    List<Packet> packets = packets(3, 4);
    byte[] a = packets.get(0).payload();
    byte[] b = packets.get(1).payload();
    byte[] c = packets.get(2).payload();
    Recorder copies = new Recorder(t -> false);
    new Channel(LINK, all(2, null, 0)).send(packets, copies);
    assertSameBytes(copies.sent, List.of(a, a, b, b, c, c));

    Recorder tries = new Recorder(t -> Set.of(1, 3, 4).contains(t));
    Channel.Outcome outcome = new Channel(LINK, all(1, null, 2)).send(packets, tries);
    assertSameBytes(tries.sent, List.of(a, b, b, c, c, c));
    assertSameBytes(outcome.payloads(), List.of(a, b, c));
    assertThat(outcome.packetsLost()).isEqualTo(3);
    assertThat(outcome.sentBits())
        .isEqualTo(outcome.payloadBits() + 8 * 23 * 6 + 8 * 5 * 3)
        .isEqualTo(8L * (a.length + 2 * b.length + 3 * c.length + 23 * 6 + 5 * 3));

    Recorder given = new Recorder(t -> t < 3);
    assertSameBytes(
        new Channel(LINK, all(1, null, 2)).send(packets, given).payloads(), List.of(b, c));
    Recorder both = new Recorder(t -> t < 2);
    new Channel(LINK, all(2, null, 1)).send(packets.subList(0, 1), both);
    assertSameBytes(both.sent, List.of(a, a, a, a));
  }

  /** Pauses are counted by packets: 6 transmissions here, each awaited. */
  @Test
  void transmissionsOfANodeAreCounted() {
    List<Packet> packets = packets(3, 4);
    Recorder air = new Recorder(t -> Set.of(1, 3, 4).contains(t));
    assertThat(new Channel(LINK, all(1, null, 2)).send(packets, air).byNode().get(0))
        .returns(6L, Channel.Traffic::transmissions)
        .returns(6L, Channel.Traffic::awaited)
        .returns(8L * 5 * 3, Channel.Traffic::receivedBits);
    assertThat(
            new Channel(LINK, all(2, null, 0))
                .send(packets, new Recorder(t -> false))
                .byNode()
                .get(0))
        .returns(6L, Channel.Traffic::transmissions)
        .returns(0L, Channel.Traffic::awaited);
  }

  /** Packet t of a group belongs to word t modulo depth; parity follows its group. */
  @Test
  void symbolsOfAWordAreDepthPacketsApart() {
    Recorder air = new Recorder(t -> false);
    new Channel(LINK, all(1, code(4, 2, 3), 0)).send(packets(10, 5), air);
    List<Integer> words = air.sent.stream().map(p -> p[2] & 0xFF).toList();
    List<Integer> indices = air.sent.stream().map(p -> p[3] & 0xFF).toList();
    assertThat(words)
        .containsExactly(0, 1, 2, 0, 1, 2, 0, 1, 2, 0, 1, 2, 3, 4, 5, 3, 4, 5, 3, 4, 5, 3)
        .hasSize(22);
    assertThat(indices.subList(0, 12)).containsExactly(0, 0, 0, 1, 1, 1, 2, 2, 2, 3, 3, 3);
    assertThat(indices.subList(12, 22)).containsExactly(0, 0, 0, 1, 2, 2, 2, 3, 3, 3);
  }

  /** n - k losses of a word are made up for; with more the data that arrived stay in use. */
  @ParameterizedTest
  @CsvSource({"0, 12", "3, 12", "4, 12", "5, 12"})
  void anUndecodableWordLeavesWhatArrived(int losses, int n) {
    List<Packet> packets = packets(8, 6);
    Channel.Outcome outcome =
        new Channel(LINK, all(1, code(n, 8, 1), 0)).send(packets, new Recorder(t -> t < losses));
    List<byte[]> sent = payloads(packets);
    assertThat(outcome.payloads()).hasSize(losses <= 4 ? 8 : 3);
    assertThat(outcome.payloads().stream().map(Arrays::toString))
        .isSubsetOf(sent.stream().map(Arrays::toString).toList());
    assertSameBytes(outcome.payloads().subList(0, 8 - losses), sent.subList(losses, 8));
  }

  /** Flips every bit of some bytes of a packet, some packets out of twelve. */
  private static Channel.Outcome sendDamaged(
      List<Packet> packets, Protection protection, int damaged, int from, int to) {
    return new Channel(LINK, protection)
        .send(
            packets,
            (index, node, payload) -> {
              byte[] copy = payload.clone();
              for (int i = from; index % 12 < damaged && i < Math.min(to, copy.length); i++) {
                copy[i] ^= -1;
              }
              return copy;
            });
  }

  /**
   * With (12, 8) two damaged packets of twelve are set right, in their data or in their numbers (a
   * packet that gives a wrong number is missing in its word); three are not, and stay as they came.
   */
  @ParameterizedTest
  @CsvSource({"0, 0, 0", "2, 4, 300", "2, 0, 4", "2, 2, 9", "4, 0, 1", "1, 0, 1", "3, 4, 300"})
  void damagedPacketsAreSetRight(int damaged, int from, int to) {
    List<Packet> packets = packets(8 * 5, 6);
    Channel.Outcome outcome =
        sendDamaged(packets, all(1, correcting(12, 8, 1), 0), damaged, from, to);
    List<String> sent = payloads(packets).stream().map(Arrays::toString).toList();
    List<String> found = outcome.payloads().stream().map(Arrays::toString).toList();
    if (damaged == 3) {
      assertThat(found).hasSize(40);
      assertThat(found.stream().filter(sent::contains)).hasSize(5 * 5);
    } else {
      assertThat(found).containsExactlyInAnyOrderElementsOf(sent);
    }
    Channel.Outcome erasuresOnly =
        sendDamaged(packets, all(1, code(12, 8, 1), 0), damaged, from, to);
    assertThat(erasuresOnly.payloads().stream().map(Arrays::toString).filter(sent::contains))
        .hasSizeLessThanOrEqualTo(found.size());
  }

  /**
   * Two first copies of each word are damaged: the code tells which was right, and one payload is
   * handed on.
   */
  @Test
  void damagedCopiesAreLeftOutWhereTheWordIsKnown() {
    List<Packet> packets = packets(8 * 6, 7);
    Channel.Outcome outcome = sendDamaged(packets, all(2, correcting(12, 8, 1), 0), 1, 5, 300);
    assertThat(outcome.payloads().stream().map(Arrays::toString).toList())
        .containsExactlyInAnyOrderElementsOf(
            payloads(packets).stream().map(Arrays::toString).toList());
  }

  /** Only the classes that are named are protected. */
  @Test
  void otherClassesAreSentOnce() {
    List<Packet> packets = packets(40, 7);
    Recorder air = new Recorder(t -> false);
    new Channel(LINK, new Protection(List.of(rule(EnumSet.of(Importance.HEADER), 4, null, 0))))
        .send(packets, air);
    assertThat(air.sent).hasSize(40 + 3 * 2);
    assertSameBytes(air.sent.subList(8, 46), payloads(packets).subList(2, 40));
  }

  /**
   * Packets that are damaged, cut, lost, doubled, out of order, of another picture or random: the
   * far end never throws, takes bounded time and at most 1 MiB and 1000 bytes for each byte that
   * arrived (a parity symbol may restore 254 others), and returns no more payloads than there is
   * room for.
   */
  @ParameterizedTest
  @MethodSource("protections")
  void damageIsOrdinaryInput(Protection protection) {
    Framing framing = new Framing(protection);
    Recorder foreign = new Recorder(t -> false);
    new Channel(LINK, protection).send(packets(40, 77), foreign);
    for (int round = 0; round < Damages.rounds(); round++) {
      Random random = new Random(round);
      int percent = random.nextInt(30);
      Recorder air = new Recorder(t -> random.nextInt(100) < percent);
      new Channel(LINK, protection).send(packets(1 + random.nextInt(30), round), air);
      List<byte[]> input = Damages.of(air.arrived, foreign.sent, random);
      long bytes = input.stream().mapToLong(p -> p.length).sum();
      List<byte[]> found =
          Damages.bounded(
              (1 << 20) + 1000 * bytes,
              protection.label() + ", damage " + round,
              () -> framing.payloads(input));
      assertThat(found.size()).as("round %d", round).isLessThanOrEqualTo(255 * input.size());
      assertThat(found).allSatisfy(p -> assertThat(p.length).isLessThanOrEqualTo(300));
    }
  }

  /** Random bytes alone, half of them with the tag of a rule that exists. */
  @ParameterizedTest
  @MethodSource("protections")
  void randomBytesAreOrdinaryInput(Protection protection) {
    Framing framing = new Framing(protection);
    for (int round = 0; round < Damages.rounds(); round++) {
      Random random = new Random(round);
      List<byte[]> input = new ArrayList<>();
      for (int i = random.nextInt(12); i >= 0; i--) {
        byte[] bytes = Damages.bytes(random, 200);
        if (bytes.length > 3 && random.nextBoolean()) {
          bytes[0] = (byte) (random.nextInt(3) << 5);
          bytes[1] = 0;
          bytes[2] = (byte) random.nextInt(2);
        }
        input.add(bytes);
      }
      long bytes = input.stream().mapToLong(p -> p.length).sum();
      List<byte[]> found =
          Damages.bounded(
              (1 << 20) + 1000 * bytes,
              protection.label() + ", bytes " + round,
              () -> framing.payloads(input));
      assertThat(found.size()).as("round %d", round).isLessThanOrEqualTo(255 * input.size());
    }
  }

  /** Every packet of one short code word, with every single bit of it flipped. */
  @Test
  void everySingleBitFlipped() {
    Protection protection = all(1, code(5, 3, 1), 0);
    Recorder air = new Recorder(t -> false);
    List<Packet> packets = packets(3, 8);
    new Channel(LINK, protection).send(packets, air);
    Framing framing = new Framing(protection);
    int flips = 0;
    for (int at = 0; at < air.sent.size(); at++) {
      for (int bit = 0; bit < 8 * air.sent.get(at).length; bit++) {
        List<byte[]> arrived = new ArrayList<>(air.sent.subList(1, 5));
        byte[] copy = air.sent.get(at).clone();
        copy[bit / 8] ^= (byte) (1 << (bit % 8));
        arrived.set(Math.max(0, at - 1), copy);
        assertThatCode(() -> framing.payloads(arrived)).doesNotThrowAnyException();
        flips++;
      }
    }
    assertThat(flips).isGreaterThan(500);
  }

  /** A foreign parity packet that claims a long word costs no more than its size. */
  @Test
  void claimsAreNotBelieved() {
    Framing framing = new Framing(all(1, code(255, 1, 1), 0));
    List<byte[]> foreign =
        IntStream.range(0, 20_000)
            .mapToObj(i -> new byte[] {0x20, (byte) (i >> 8), (byte) i, (byte) 200, 1, 0, 0, 0, 0})
            .toList();
    List<byte[]> found =
        assertTimeoutPreemptively(Duration.ofSeconds(20), () -> framing.payloads(foreign));
    assertThat(found).hasSizeLessThanOrEqualTo(foreign.size());
  }

  @Test
  void labels() {
    assertThat(protections().map(Protection::label))
        .containsExactly(
            "",
            "repeat2",
            "retry3",
            "repeat3+retry2",
            "rs12-8x4",
            "rs12-8x1",
            "rs255-223x1",
            "rs5-1x3",
            "rs10-8x2+repeat2+retry1",
            "rs12-8x4e",
            "rs255-223x1e",
            "rs10-8x2e+repeat2+retry1",
            "rs12-8x2+hamming7-4x8+repeat2+retry1",
            "repeat3:header rs12-8x2:basis+first",
            "rs6-2x1+retry1:header rs9-8x3:rest");
    assertThat(new Protection(List.of(new Protection.Rule(ALL, 1, null, 3, 11))).label())
        .isEqualTo("retry3ack11");
  }

  @Test
  void rulesThatDoNothingAreDropped() {
    assertThat(all(1, null, 0)).isEqualTo(Protection.NONE);
  }

  @Test
  void whatCannotBeIsRefused() {
    Protection.Rule header = rule(EnumSet.of(Importance.HEADER), 2, null, 0);
    assertThatIllegalArgumentException()
        .isThrownBy(() -> new Protection(List.of(header, rule(ALL, 2, null, 0))))
        .withMessageContaining("header");
    assertThatIllegalArgumentException().isThrownBy(() -> rule(ALL, 0, null, 0));
    assertThatIllegalArgumentException().isThrownBy(() -> rule(ALL, 17, null, 0));
    assertThatIllegalArgumentException().isThrownBy(() -> rule(ALL, 1, null, 256));
    assertThatIllegalArgumentException().isThrownBy(() -> rule(Set.of(), 2, null, 0));
    assertThatIllegalArgumentException().isThrownBy(() -> code(256, 8, 1));
    assertThatIllegalArgumentException().isThrownBy(() -> code(8, 8, 1));
    assertThatIllegalArgumentException().isThrownBy(() -> code(8, 0, 1));
    assertThatIllegalArgumentException().isThrownBy(() -> code(8, 4, 0));
  }
}
