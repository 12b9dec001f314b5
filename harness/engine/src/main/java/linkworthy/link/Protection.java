package linkworthy.link;

import java.util.ArrayList;
import java.util.Collection;
import java.util.EnumSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.stream.Collectors;
import linkworthy.input.Require;
import org.jspecify.annotations.Nullable;

/**
 * How the packets of a codec are protected on the way: one rule for some or all classes of
 * importance, or several rules for classes of their own. {@link Channel} carries it out.
 *
 * @param rules in the order of the study; no class is in two of them; rules that do nothing are
 *     dropped
 */
public record Protection(List<Rule> rules) {
  /** Every packet is sent once. */
  public static final Protection NONE = new Protection(List.of());

  /** The word used in studies for no protection. */
  public static final String NONE_ID = "none";

  /**
   * The acknowledgement that labels pass over in silence: the frame of IEEE 802.15.4-2003, section
   * 7.2.2.3, in bytes.
   */
  private static final int USUAL_ACK_BYTES = 5;

  public static final int MAX_REPEAT = 16;
  public static final int MAX_RETRANSMIT = 255;
  public static final int MAX_DEPTH = 4096;

  /**
   * @throws IllegalArgumentException if a class is in two rules
   */
  public Protection {
    Set<Importance> seen = EnumSet.noneOf(Importance.class);
    for (Rule rule : rules) {
      for (Importance importance : rule.only()) {
        if (!seen.add(importance)) {
          throw new IllegalArgumentException("two rules for the class " + importance.id());
        }
      }
    }
    rules = rules.stream().filter(rule -> !rule.isIdle()).toList();
  }

  /**
   * One way to protect some classes of packets. The parts combine: parity packets are coded on
   * their bits, repeated and retransmitted like any other.
   *
   * @param only classes it protects, at least one
   * @param repeat copies of each packet in all, 1 to {@link #MAX_REPEAT}
   * @param code parity packets; null for none
   * @param hamming a code on the bits of each transmission; null for none
   * @param retransmit further tries for a packet of which no copy arrived, 0 to {@link
   *     #MAX_RETRANSMIT}; with 0 nothing is acknowledged
   * @param ackBytes length of an acknowledgement with all its headers, in bytes
   */
  public record Rule(
      Set<Importance> only,
      int repeat,
      @Nullable ErasureCode code,
      @Nullable HammingCode hamming,
      int retransmit,
      int ackBytes) {
    /**
     * @throws IllegalArgumentException if a number is outside its range or no class is named
     */
    public Rule {
      Require.inRange(only.size(), 1, Importance.values().length, "only (number of classes)");
      Require.inRange(repeat, 1, MAX_REPEAT, "repeat (copies)");
      Require.inRange(retransmit, 0, MAX_RETRANSMIT, "retransmit (tries)");
      Require.inRange(ackBytes, 0, Link.MAX_PAYLOAD, "ack-bytes (bytes)");
      only = Set.copyOf(only);
    }

    /** A rule without a code on bits. */
    public Rule(
        Set<Importance> only,
        int repeat,
        @Nullable ErasureCode code,
        int retransmit,
        int ackBytes) {
      this(only, repeat, code, null, retransmit, ackBytes);
    }

    /** The classes, most important first. */
    public List<Importance> classes() {
      return only.stream().sorted().toList();
    }

    /** The parts that set flipped bits right, as studies call them. */
    public List<String> forFlippedBits() {
      List<String> parts = new ArrayList<>();
      if (hamming != null) {
        parts.add("hamming");
      }
      if (code != null && code.correctsErrors()) {
        parts.add("corrects: " + ErasureCode.ERRORS);
      }
      return parts;
    }

    /** The parts that make up for packets that do not arrive, and do nothing else. */
    public List<String> forLostPackets() {
      List<String> parts = new ArrayList<>();
      if (code != null && !code.correctsErrors()) {
        parts.add("reed-solomon with corrects: " + ErasureCode.ERASURES);
      }
      if (retransmit > 0) {
        parts.add("retransmit");
      }
      return parts;
    }

    private boolean isIdle() {
      return repeat == 1 && code == null && hamming == null && retransmit == 0;
    }

    private String label() {
      List<String> words = new ArrayList<>();
      if (code != null) {
        words.add(
            "rs"
                + code.n()
                + "-"
                + code.k()
                + "x"
                + code.depth()
                + (code.correctsErrors() ? "e" : ""));
      }
      if (hamming != null) {
        words.add("hamming7-4x" + hamming.depth());
      }
      if (repeat > 1) {
        words.add("repeat" + repeat);
      }
      if (retransmit > 0) {
        words.add("retry" + retransmit + (ackBytes == USUAL_ACK_BYTES ? "" : "ack" + ackBytes));
      }
      String all = String.join("+", words);
      return only.size() == Importance.values().length
          ? all
          : all + ":" + classes().stream().map(Importance::id).collect(Collectors.joining("+"));
    }

    private Map<String, Object> settings() {
      Map<String, Object> settings = new LinkedHashMap<>();
      settings.put("repeat", repeat);
      settings.put("reed-solomon", code == null ? NONE_ID : code.settings());
      if (hamming != null) {
        settings.put("hamming", hamming.settings());
      }
      settings.put("retransmit", retransmit);
      if (retransmit > 0) {
        settings.put("ack-bytes", ackBytes);
      }
      settings.put("only", classes().stream().map(Importance::id).toList());
      return settings;
    }
  }

  /**
   * A Reed-Solomon code across packets, see {@link Framing}.
   *
   * @param n symbols of a code word, above k, up to 255
   * @param k data symbols of a full code word, at least 1
   * @param depth distance between the symbols of a code word, in packets, 1 to {@link #MAX_DEPTH}
   * @param correctsErrors whether packets that came may be damaged and are set right, too; if not,
   *     they are taken to be right and missing ones are restored from them
   */
  public record ErasureCode(int n, int k, int depth, boolean correctsErrors) {
    /** The word used in studies for restoring missing packets alone. */
    public static final String ERASURES = "erasures";

    /** The word used in studies for setting damaged packets right as well. */
    public static final String ERRORS = "errors";

    /** A code that restores missing packets. */
    public ErasureCode(int n, int k, int depth) {
      this(n, k, depth, false);
    }

    public ErasureCode {
      Require.inRange(n, 2, 255, "n (symbols)");
      Require.inRange(k, 1, n - 1, "k (data symbols)");
      Require.inRange(depth, 1, MAX_DEPTH, "depth (packets)");
    }

    private Map<String, Object> settings() {
      Map<String, Object> settings = new LinkedHashMap<>();
      settings.put("n", n);
      settings.put("k", k);
      settings.put("depth", depth);
      if (correctsErrors) {
        settings.put("corrects", ERRORS);
      }
      return settings;
    }
  }

  /** Whether every packet is simply sent once. */
  public boolean isNone() {
    return rules.isEmpty();
  }

  /** Whether packets carry a protection header, which they do if any rule has a code. */
  boolean isFramed() {
    return rules.stream().anyMatch(rule -> rule.code() != null);
  }

  private int framingBytes() {
    return isFramed() ? Framing.MAX_OVERHEAD : 0;
  }

  private boolean codesBits() {
    return rules.stream().anyMatch(rule -> rule.hamming() != null);
  }

  /**
   * Bytes of each payload that a codec must leave free: the longest header and length of an erasure
   * code, and what a code on bits adds.
   *
   * @param payloadBytes largest payload of a transmission
   */
  public int overheadBytes(int payloadBytes) {
    int coded = codesBits() ? HammingCode.room(payloadBytes) : payloadBytes;
    return payloadBytes - coded + framingBytes();
  }

  /** The smallest payload of a transmission that leaves a codec so many bytes. */
  public int leastPayload(int codecBytes) {
    int framed = codecBytes + framingBytes();
    return codesBits() ? HammingCode.coded(framed) : framed;
  }

  /**
   * What goes after a codec's label: {@code rs12-8x4} (n, k, depth), with an e behind it where
   * errors are corrected, {@code hamming7-4x8} (depth), {@code repeat2}, {@code retry3}, joined by
   * a plus sign where they combine; then, unless all classes are protected, a colon and the
   * classes. An acknowledgement of other than 5 bytes stands with its length, as in {@code
   * retry3ack11}. Rules are separated by blanks; empty for no protection.
   */
  public String label() {
    return rules.stream().map(Rule::label).collect(Collectors.joining(" "));
  }

  /** The protection as a study file writes it, every default included, in a fixed order. */
  public Object settings() {
    Collection<Map<String, Object>> all = rules.stream().map(Rule::settings).toList();
    return isNone() ? NONE_ID : rules.size() == 1 ? all.iterator().next() : all;
  }
}
