package linkworthy.link;

import java.util.Map;
import linkworthy.input.Require;

/**
 * The Hamming (7,4) code on the bits of a payload (Hamming, Bell System Technical Journal 29,
 * 1950): four data bits stand at places 3, 5, 6 and 7 of a word, parity bits at 1, 2 and 4, so that
 * the places of all ones, added bit by bit without carry, give 0. At the receiver that sum is the
 * place of a single flipped bit, which is flipped back; words with more are wrong and nothing says
 * so. At a bit error rate p a word fails with probability 1 - (1-p)^7 - 7 p (1-p)^6.
 *
 * <p>Bits are taken and sent lowest first in each byte. The words of a payload are sent in groups
 * of {@code depth}: first the bits at place 1 of all words of the group, then those at place 2, and
 * so on; so a burst of up to {@code depth} flips hits each word once at most. The last group may
 * have fewer words. A payload of L bytes becomes one of 7 L / 4 bytes, rounded up.
 *
 * @param depth distance between the bits of a word, in bits, 1 to {@link Protection#MAX_DEPTH}
 */
public record HammingCode(int depth) {
  private static final int DATA = 4;
  private static final int LENGTH = 7;
  private static final int[] DATA_PLACES = {3, 5, 6, 7};

  public HammingCode {
    Require.inRange(depth, 1, Protection.MAX_DEPTH, "depth (bits)");
  }

  /** Largest payload whose coded form has at most so many bytes. */
  static int room(int codedBytes) {
    return (int) (codedBytes * (long) DATA / LENGTH);
  }

  /** Smallest number of bytes that {@link #room} for a payload of so many. */
  static int coded(int bytes) {
    return (int) ((bytes * (long) LENGTH + DATA - 1) / DATA);
  }

  /**
   * The word of four data bits.
   *
   * @param data bit 0 goes to place 3, bit 3 to place 7
   * @return the bit at place i as bit i - 1
   */
  static int word(int data) {
    int word = 0;
    for (int i = 0; i < DATA; i++) {
      word |= (data >> i & 1) << (DATA_PLACES[i] - 1);
    }
    int sum = sumOfPlaces(word);
    for (int parity = 1; parity < LENGTH; parity <<= 1) {
      word |= (sum & parity) == 0 ? 0 : 1 << (parity - 1);
    }
    return word;
  }

  /** The data bits of a word, after one flipped bit is set right. */
  static int data(int received) {
    int wrong = sumOfPlaces(received);
    int word = wrong == 0 ? received : received ^ 1 << (wrong - 1);
    int data = 0;
    for (int i = 0; i < DATA; i++) {
      data |= (word >> (DATA_PLACES[i] - 1) & 1) << i;
    }
    return data;
  }

  private static int sumOfPlaces(int word) {
    int sum = 0;
    for (int place = 1; place <= LENGTH; place++) {
      sum ^= (word >> (place - 1) & 1) * place;
    }
    return sum;
  }

  /** A payload as it is sent; spare bits at the end are 0. */
  byte[] encode(byte[] payload) {
    byte[] coded = new byte[coded(payload.length)];
    int words = 2 * payload.length;
    for (int w = 0; w < words; w++) {
      int word = word((payload[w / 2] >> (DATA * (w % 2))) & 15);
      for (int place = 0; place < LENGTH; place++) {
        int at = position(w, place, words);
        coded[at / 8] |= (byte) ((word >> place & 1) << at % 8);
      }
    }
    return coded;
  }

  /** The payload of what arrived, whatever its length and state. */
  byte[] decode(byte[] coded) {
    byte[] payload = new byte[room(coded.length)];
    int words = 2 * payload.length;
    for (int w = 0; w < words; w++) {
      int word = 0;
      for (int place = 0; place < LENGTH; place++) {
        int at = position(w, place, words);
        word |= (coded[at / 8] >> at % 8 & 1) << place;
      }
      payload[w / 2] |= (byte) (data(word) << (DATA * (w % 2)));
    }
    return payload;
  }

  private int position(int word, int place, int words) {
    int first = word - word % depth;
    int together = Math.min(depth, words - first);
    return first * LENGTH + place * together + (word - first);
  }

  Map<String, Object> settings() {
    return Map.of("depth", depth);
  }
}
