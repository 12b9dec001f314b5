package linkworthy.link;

import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.BitSet;
import java.util.Collections;
import java.util.Comparator;
import java.util.EnumMap;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.Set;
import java.util.SortedMap;
import java.util.TreeMap;
import linkworthy.input.BadInput;
import org.jspecify.annotations.Nullable;

/**
 * What protection writes into packets and reads out of them again.
 *
 * <p>Without a Reed-Solomon code in any rule, payloads stay as they are. With one, every payload
 * begins with a header. The top three bits of the first byte are the rule's place in the
 * protection, from 1, or 0 for a packet outside every code; that one byte is then all. Otherwise
 * the other 21 bits of the first three bytes number the code word, and the fourth is the symbol's
 * index: from 0 for data, from k for parity. A parity packet has a fifth byte, the data symbols of
 * its word.
 *
 * <p>A data symbol is the length of a payload in two bytes, the payload, and zeros up to the
 * longest of its word. Data packets carry the payload alone; parity packets carry whole symbols.
 *
 * <p>Packets of a rule are coded in groups of k times depth, in sending order. Packet t of a group,
 * data first and then parity, belongs to word t modulo depth, so the symbols of a word are depth
 * packets apart (more, where packets of other classes go between). A group holds packets of one
 * node alone; where another node's begin, and at the end, a group may have fewer data packets, its
 * words then fewer data symbols but no fewer parity symbols; below depth packets there is a word
 * for each.
 */
final class Framing {
  private static final int WORD_HEADER = 4;
  private static final int PARITY_HEADER = 5;
  private static final int LENGTH = 2;

  /** A parity packet is longer than the longest payload of its word by its header and a length. */
  static final int MAX_OVERHEAD = PARITY_HEADER + LENGTH;

  private static final int WORD_BITS = 21;

  private final Protection protection;
  private final Map<Importance, Protection.Rule> rules = new EnumMap<>(Importance.class);
  private final @Nullable ReedSolomon[] codes;

  /** Whether a packet that says it is outside every code can only be a damaged one. */
  private final boolean correctsAll;

  Framing(Protection protection) {
    this.protection = protection;
    this.codes = new ReedSolomon[protection.rules().size()];
    for (int i = 0; i < codes.length; i++) {
      Protection.Rule rule = protection.rules().get(i);
      rule.only().forEach(importance -> rules.put(importance, rule));
      Protection.ErasureCode code = rule.code();
      codes[i] = code == null ? null : new ReedSolomon(code.n() - code.k());
    }
    this.correctsAll = Arrays.stream(Importance.values()).allMatch(this::isCorrected);
  }

  private boolean isCorrected(Importance importance) {
    Protection.Rule rule = rules.get(importance);
    Protection.ErasureCode code = rule == null ? null : rule.code();
    return code != null && code.correctsErrors();
  }

  /** Whether packets go out as they are, once each. */
  boolean isTransparent() {
    return protection.isNone();
  }

  /** Takes packets in sending order. */
  interface Sender {
    /**
     * @param node the node that sends it
     * @param rule the packet's rule; null for none
     */
    void send(byte[] payload, int node, Protection.@Nullable Rule rule);
  }

  /**
   * Sends the packets with their headers, and parity packets after the last data packet of their
   * group.
   *
   * @throws BadInput if there are more code words than can be numbered
   */
  void send(List<Packet> packets, Sender sender) {
    Map<Protection.Rule, Group> groups = new LinkedHashMap<>();
    for (int i = 0; i < codes.length; i++) {
      ReedSolomon code = codes[i];
      if (code != null) {
        Protection.Rule rule = protection.rules().get(i);
        groups.put(rule, new Group(i, rule, code, sender));
      }
    }
    for (Packet packet : packets) {
      Protection.Rule rule = rules.get(packet.importance());
      Group group = rule == null ? null : groups.get(rule);
      if (group != null) {
        group.add(packet.payload(), packet.node());
      } else if (protection.isFramed()) {
        sender.send(join(new byte[1], packet.payload()), packet.node(), rule);
      } else {
        sender.send(packet.payload(), packet.node(), rule);
      }
    }
    groups.values().forEach(Group::close);
  }

  private static byte[] join(byte[] head, byte[] tail) {
    byte[] both = Arrays.copyOf(head, head.length + tail.length);
    System.arraycopy(tail, 0, both, head.length, tail.length);
    return both;
  }

  /** Data packets of one rule that wait for their parity. */
  private static final class Group {
    private final int place;
    private final Protection.Rule rule;
    private final Protection.ErasureCode sizes;
    private final ReedSolomon code;
    private final Sender sender;
    private final List<byte[]> waiting = new ArrayList<>();
    private int node;
    private int firstWord;

    Group(int place, Protection.Rule rule, ReedSolomon code, Sender sender) {
      this.place = place;
      this.rule = rule;
      this.sizes = Objects.requireNonNull(rule.code());
      this.code = code;
      this.sender = sender;
    }

    void add(byte[] payload, int payloadNode) {
      if (payloadNode != node) {
        close();
        node = payloadNode;
      }
      int at = waiting.size();
      waiting.add(payload);
      send(header(at % sizes.depth(), at / sizes.depth(), WORD_HEADER), payload);
      if (waiting.size() == sizes.k() * sizes.depth()) {
        close();
      }
    }

    private byte[] header(int wordOfGroup, int index, int length) {
      int word = firstWord + wordOfGroup;
      if (word >= 1 << WORD_BITS) {
        throw new BadInput(
            "the picture needs more than "
                + (1 << WORD_BITS)
                + " Reed-Solomon code words; accepted: a larger k or larger packets");
      }
      int tag = (place + 1) << WORD_BITS | word;
      byte[] header = new byte[length];
      header[0] = (byte) (tag >> 16);
      header[1] = (byte) (tag >> 8);
      header[2] = (byte) tag;
      header[3] = (byte) index;
      return header;
    }

    private void send(byte[] header, byte[] body) {
      sender.send(join(header, body), node, rule);
    }

    /** Sends the parity of what waits. */
    void close() {
      int words = Math.min(sizes.depth(), waiting.size());
      byte[][][] data = new byte[words][][];
      byte[][][] parity = new byte[words][][];
      for (int w = 0; w < words; w++) {
        data[w] = symbols(w, words);
        parity[w] = code.encode(data[w]);
      }
      for (int i = 0; i < words * code.parity(); i++) {
        int w = (waiting.size() + i) % words;
        byte[] header = header(w, sizes.k() + i / words, PARITY_HEADER);
        header[WORD_HEADER] = (byte) data[w].length;
        send(header, parity[w][i / words]);
      }
      firstWord += words;
      waiting.clear();
    }

    private byte[][] symbols(int word, int words) {
      List<byte[]> payloads = new ArrayList<>();
      for (int t = word; t < waiting.size(); t += words) {
        payloads.add(waiting.get(t));
      }
      int longest = payloads.stream().mapToInt(p -> p.length).max().orElse(0);
      return payloads.stream().map(p -> symbol(p, LENGTH + longest)).toArray(byte[][]::new);
    }
  }

  private static byte[] symbol(byte[] payload, int length) {
    byte[] symbol = new byte[length];
    symbol[0] = (byte) (payload.length >> 8);
    symbol[1] = (byte) payload.length;
    System.arraycopy(payload, 0, symbol, LENGTH, payload.length);
    return symbol;
  }

  /**
   * The codec's payloads among what arrived, in order of arrival and set right where the code does
   * that, then those that could be restored, by rule and code word. Equal packets count once.
   * Packets may be damaged, cut short, foreign, in any order: what makes no sense is dropped,
   * nothing throws, and the work is bounded by the number and the lengths of the packets.
   */
  List<byte[]> payloads(List<byte[]> arrived) {
    if (protection.isNone()) {
      return arrived;
    }
    List<byte[]> payloads = new ArrayList<>();
    SortedMap<Integer, Word> words = new TreeMap<>();
    Set<ByteBuffer> known = new HashSet<>();
    for (byte[] packet : arrived) {
      if (known.add(ByteBuffer.wrap(packet))) {
        if (protection.isFramed()) {
          open(packet, payloads, words);
        } else {
          payloads.add(packet);
        }
      }
    }
    BitSet refuted = new BitSet();
    for (Word word : words.values()) {
      word.restoreInto(payloads, refuted);
    }
    for (int i = refuted.length() - 1; i >= 0; i = refuted.previousSetBit(i - 1)) {
      payloads.remove(i);
    }
    return payloads;
  }

  private void open(byte[] packet, List<byte[]> payloads, SortedMap<Integer, Word> words) {
    if (packet.length > 0 && packet[0] == 0) {
      if (!correctsAll) {
        payloads.add(tail(packet, 1));
      }
      return;
    }
    int place = packet.length < WORD_HEADER ? -1 : ((packet[0] & 0xFF) >> 5) - 1;
    ReedSolomon code = place < 0 || place >= codes.length ? null : codes[place];
    if (code == null) {
      return;
    }
    int tag = (packet[0] & 0xFF) << 16 | (packet[1] & 0xFF) << 8 | (packet[2] & 0xFF);
    int index = packet[3] & 0xFF;
    Protection.ErasureCode sizes = Objects.requireNonNull(protection.rules().get(place).code());
    if (index < sizes.k()) {
      byte[] payload = tail(packet, WORD_HEADER);
      payloads.add(payload);
      word(words, tag, code, sizes).addData(index, payloads.size() - 1);
    } else if (index < sizes.n() && packet.length >= MAX_OVERHEAD) {
      int count = packet[WORD_HEADER] & 0xFF;
      if (count >= 1 && count <= sizes.k()) {
        word(words, tag, code, sizes)
            .addParity(index - sizes.k(), count, tail(packet, PARITY_HEADER));
      }
    }
  }

  private static Word word(
      SortedMap<Integer, Word> words, int tag, ReedSolomon code, Protection.ErasureCode sizes) {
    return words.computeIfAbsent(tag, t -> new Word(code, sizes.correctsErrors()));
  }

  private static byte[] tail(byte[] packet, int from) {
    return Arrays.copyOfRange(packet, from, packet.length);
  }

  /** The symbols of one code word that arrived; the first of each index counts. */
  private static final class Word {
    private final ReedSolomon code;
    private final boolean correctsErrors;

    /** Where the payloads of each index stand among all, the first that came first. */
    private final SortedMap<Integer, List<Integer>> data = new TreeMap<>();

    /** Parity symbols by what their packets say of the word, the first that came first. */
    private final Map<Shape, SortedMap<Integer, byte[]>> parity = new LinkedHashMap<>();

    /** Data symbols of a word, and bytes of a symbol. */
    private record Shape(int count, int length) {}

    Word(ReedSolomon code, boolean correctsErrors) {
      this.code = code;
      this.correctsErrors = correctsErrors;
    }

    void addData(int index, int place) {
      data.computeIfAbsent(index, i -> new ArrayList<>()).add(place);
    }

    void addParity(int index, int count, byte[] symbol) {
      parity
          .computeIfAbsent(new Shape(count, symbol.length), shape -> new TreeMap<>())
          .putIfAbsent(index, symbol);
    }

    /**
     * The word's shape, about which damaged packets may contradict each other: what most say, or
     * the first one if packets that came are taken to be right.
     */
    private Shape shape() {
      return correctsErrors
          ? Collections.max(parity.keySet(), Comparator.comparing(s -> symbols(s).size()))
          : parity.keySet().iterator().next();
    }

    private SortedMap<Integer, byte[]> symbols(Shape shape) {
      return Objects.requireNonNull(parity.get(shape));
    }

    /**
     * Adds what could be restored to the payloads, and puts what could be set right in its place.
     *
     * @param refuted takes the places of payloads that are shown not to be what they claim
     */
    void restoreInto(List<byte[]> payloads, BitSet refuted) {
      if (parity.isEmpty()) {
        return;
      }
      Shape shape = shape();
      byte[] @Nullable [] rows = new byte[shape.count()][];
      int have = 0;
      for (int i = 0; i < rows.length; i++) {
        byte[] payload = data.containsKey(i) ? payloads.get(data.get(i).get(0)) : null;
        if (payload != null && payload.length <= shape.length() - LENGTH) {
          rows[i] = symbol(payload, shape.length());
          have++;
        }
      }
      byte[] @Nullable [] checks = new byte[code.parity()][];
      symbols(shape).forEach((index, symbol) -> checks[index] = symbol);
      if (correctsErrors) {
        correct(rows, checks, payloads, refuted);
      } else if (have < rows.length) {
        restore(rows, checks, payloads);
      }
    }

    private void restore(
        byte[] @Nullable [] rows, byte[] @Nullable [] checks, List<byte[]> payloads) {
      if (code.restore(rows, checks)) {
        for (int i = 0; i < rows.length; i++) {
          byte[] row = rows[i];
          if (row != null && !data.containsKey(i) && isSound(row)) {
            payloads.add(payload(row));
          }
        }
      }
    }

    /**
     * A payload that is known in full stands for all that claimed its place; one of which some
     * bytes stayed as they came replaces the first that claimed it, and is left out if none did.
     */
    private void correct(
        byte[] @Nullable [] rows,
        byte[] @Nullable [] checks,
        List<byte[]> payloads,
        BitSet refuted) {
      boolean[] came = new boolean[rows.length];
      for (int i = 0; i < rows.length; i++) {
        came[i] = rows[i] != null;
      }
      BitSet beyond = code.correct(rows, checks);
      for (int i = 0; i < rows.length; i++) {
        byte[] row = rows[i];
        if (row == null || !isSound(row)) {
          continue;
        }
        int firstBeyond = beyond.nextSetBit(0);
        boolean known = firstBeyond < 0 || firstBeyond >= LENGTH + lengthIn(row);
        List<Integer> places = data.getOrDefault(i, List.of());
        if (known) {
          places.forEach(refuted::set);
        }
        if (came[i]) {
          payloads.set(places.get(0), payload(row));
          refuted.clear(places.get(0));
        } else if (known) {
          payloads.add(payload(row));
        }
      }
    }

    private static byte[] payload(byte[] symbol) {
      return Arrays.copyOfRange(symbol, LENGTH, LENGTH + lengthIn(symbol));
    }

    private static int lengthIn(byte[] symbol) {
      return (symbol[0] & 0xFF) << 8 | (symbol[1] & 0xFF);
    }

    /** Whether length and padding are possible; damage elsewhere in the word may break them. */
    private static boolean isSound(byte[] symbol) {
      int end = LENGTH + lengthIn(symbol);
      boolean sound = end <= symbol.length;
      for (int i = end; sound && i < symbol.length; i++) {
        sound = symbol[i] == 0;
      }
      return sound;
    }
  }
}
