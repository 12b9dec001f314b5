package linkworthy.link;

import java.util.ArrayList;
import java.util.BitSet;
import java.util.Collections;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.SortedMap;
import java.util.TreeMap;
import org.jspecify.annotations.Nullable;

/** The symbols of one code word that arrived; the first of each index counts. */
final class ReceivedWord {
  private final ReedSolomon code;
  private final boolean correctsErrors;

  /** Where the payloads of each index stand among all, the first that came first. */
  private final SortedMap<Integer, List<Integer>> data = new TreeMap<>();

  /** Parity symbols by what their packets say of the word, the first that came first. */
  private final Map<Shape, SortedMap<Integer, byte[]>> parity = new LinkedHashMap<>();

  /** Data symbols of a word, and bytes of a symbol. */
  private record Shape(int count, int length) {}

  ReceivedWord(ReedSolomon code, boolean correctsErrors) {
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
   * The word's shape, about which damaged packets may contradict each other: what most say, or the
   * first one if packets that came are taken to be right.
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
      if (payload != null && payload.length <= shape.length() - DataSymbol.OVERHEAD) {
        rows[i] = DataSymbol.of(payload, shape.length());
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
        if (row != null && !data.containsKey(i) && DataSymbol.isSound(row)) {
          payloads.add(DataSymbol.payload(row));
        }
      }
    }
  }

  /**
   * A payload that is known in full stands for all that claimed its place; one of which some bytes
   * stayed as they came replaces the first that claimed it, and is left out if none did.
   */
  private void correct(
      byte[] @Nullable [] rows, byte[] @Nullable [] checks, List<byte[]> payloads, BitSet refuted) {
    boolean[] came = new boolean[rows.length];
    for (int i = 0; i < rows.length; i++) {
      came[i] = rows[i] != null;
    }
    BitSet beyond = code.correct(rows, checks);
    for (int i = 0; i < rows.length; i++) {
      byte[] row = rows[i];
      if (row == null || !DataSymbol.isSound(row)) {
        continue;
      }
      int firstBeyond = beyond.nextSetBit(0);
      boolean known = firstBeyond < 0 || firstBeyond >= DataSymbol.end(row);
      List<Integer> places = data.getOrDefault(i, List.of());
      if (known) {
        places.forEach(refuted::set);
      }
      if (came[i]) {
        payloads.set(places.get(0), DataSymbol.payload(row));
        refuted.clear(places.get(0));
      } else if (known) {
        payloads.add(DataSymbol.payload(row));
      }
    }
  }
}
