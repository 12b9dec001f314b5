package linkworthy.link;

import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.BitSet;
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
 * <p>Data packets carry the payload alone; parity packets carry whole symbols, as {@link
 * DataSymbol} has them.
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

  /** A parity packet is longer than the longest payload of its word by its header and a length. */
  static final int MAX_OVERHEAD = PARITY_HEADER + DataSymbol.OVERHEAD;

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
      return payloads.stream()
          .map(p -> DataSymbol.of(p, DataSymbol.OVERHEAD + longest))
          .toArray(byte[][]::new);
    }
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
    SortedMap<Integer, ReceivedWord> words = new TreeMap<>();
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
    for (ReceivedWord word : words.values()) {
      word.restoreInto(payloads, refuted);
    }
    for (int i = refuted.length() - 1; i >= 0; i = refuted.previousSetBit(i - 1)) {
      payloads.remove(i);
    }
    return payloads;
  }

  private void open(byte[] packet, List<byte[]> payloads, SortedMap<Integer, ReceivedWord> words) {
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

  private static ReceivedWord word(
      SortedMap<Integer, ReceivedWord> words,
      int tag,
      ReedSolomon code,
      Protection.ErasureCode sizes) {
    return words.computeIfAbsent(tag, t -> new ReceivedWord(code, sizes.correctsErrors()));
  }

  private static byte[] tail(byte[] packet, int from) {
    return Arrays.copyOfRange(packet, from, packet.length);
  }
}
