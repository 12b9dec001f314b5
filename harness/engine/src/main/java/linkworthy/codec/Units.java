package linkworthy.codec;

import linkworthy.link.Importance;
import linkworthy.link.Packetizer;
import org.jspecify.annotations.Nullable;

/**
 * The units of a coded picture: what they look like and how they are cut.
 *
 * <p>A packet is a preamble (stream tag in 16 bits, width, height and K as varints) and units. A
 * unit starts on a whole byte with a code (varint):
 *
 * <ul>
 *   <li>{@link #MEANS}: offset, count (varints), then B bits a mean
 *   <li>{@link #REGION}: first component, components, first observation, observations (varints), a
 *       bit that says whether all components share one Rice parameter, then component by component
 *       its parameter (4 bits) and its values
 *   <li>{@code 2 + 2k}, direction k: offset, count (varints), its step as a 32-bit float, a Rice
 *       parameter (4 bits), values
 *   <li>{@code 3 + 2k}, component k: offset, count (varints), a Rice parameter (4 bits), values
 * </ul>
 *
 * Without a quantiser there are neither steps nor parameters, and each value is a 32-bit float.
 */
final class Units {
  static final int MEANS = 0;
  static final int REGION = 1;

  /** A unit with fewer values than this is not worth its header at the end of a packet. */
  private static final int SENSIBLE_VALUES = 8;

  private static final int PARAMETER_BITS = 4;

  private Units() {}

  static int codeOfDirection(int k) {
    return 2 + 2 * k;
  }

  static int codeOfComponent(int k) {
    return 3 + 2 * k;
  }

  private static boolean isSensible(int values, int left, boolean whole) {
    return values > 0 && (whole || values >= Math.min(left, SENSIBLE_VALUES));
  }

  private static int largestFolded(int[] symbols) {
    int all = 0;
    for (int symbol : symbols) {
      all |= RiceCoder.fold(symbol);
    }
    return all;
  }

  /** A run of values of one kind: means, a direction or a component. */
  static final class Run implements Packetizer.Strip {
    private final int code;
    private final int[] symbols;
    private final int fixedBits;
    private final @Nullable Quantizer step;
    private final Importance importance;
    private final RiceCoder.Cost cost;
    private int done;

    private Run(
        int code, int[] symbols, int fixedBits, @Nullable Quantizer step, Importance importance) {
      this.importance = importance;
      this.code = code;
      this.symbols = symbols;
      this.fixedBits = fixedBits;
      this.step = step;
      this.cost = new RiceCoder.Cost(fixedBits > 0 ? 0 : largestFolded(symbols));
    }

    static Run ofMeans(int[] means, int bitDepth) {
      return new Run(MEANS, means, bitDepth, null, Importance.HEADER);
    }

    static Run ofDirection(int k, Symbols symbols, Quantizer quantizer) {
      return quantizer.isNone()
          ? new Run(codeOfDirection(k), symbols.direction(k), 32, null, Importance.BASIS)
          : new Run(
              codeOfDirection(k),
              symbols.direction(k),
              0,
              symbols.directionQuantizer(k),
              Importance.BASIS);
    }

    static Run ofComponent(int k, int kept, Symbols symbols, Quantizer quantizer) {
      return new Run(
          codeOfComponent(k),
          symbols.component(k),
          quantizer.isNone() ? 32 : 0,
          null,
          k < Math.max(1, kept / 4) ? Importance.FIRST : Importance.REST);
    }

    @Override
    public boolean isDone() {
      return done == symbols.length;
    }

    @Override
    public Importance importance() {
      return importance;
    }

    @Override
    public byte @Nullable [] take(int room, boolean whole) {
      int left = symbols.length - done;
      int header =
          BitWriter.varintBytes(code)
              + BitWriter.varintBytes(done)
              + BitWriter.varintBytes(left)
              + (step == null ? 0 : Float.BYTES);
      int count = fitting(8L * (room - header));
      if (!isSensible(count, left, whole)) {
        return null;
      }
      BitWriter out = new BitWriter();
      out.writeVarint(code);
      out.writeVarint(done);
      out.writeVarint(count);
      if (step != null) {
        out.write(Float.floatToRawIntBits((float) step.step()), 32);
      }
      writeValues(out, count);
      done += count;
      return out.toByteArray();
    }

    private int fitting(long bits) {
      int left = symbols.length - done;
      if (fixedBits > 0) {
        return (int) Math.max(0, Math.min(left, bits / fixedBits));
      }
      cost.clear();
      int count = 0;
      while (count < left) {
        int folded = RiceCoder.fold(symbols[done + count]);
        cost.add(folded);
        if (PARAMETER_BITS + cost.least() > bits) {
          cost.remove(folded);
          break;
        }
        count++;
      }
      return count;
    }

    private void writeValues(BitWriter out, int count) {
      int k = cost.parameter();
      if (fixedBits == 0) {
        out.write(k, PARAMETER_BITS);
      }
      for (int i = done; i < done + count; i++) {
        if (fixedBits > 0) {
          out.write(symbols[i], fixedBits);
        } else {
          RiceCoder.write(out, RiceCoder.fold(symbols[i]), k);
        }
      }
    }
  }

  /** All components, cut along the observations. */
  static final class Region implements Packetizer.Strip {
    private final int[][] symbols;
    private final boolean floats;
    private final RiceCoder.Cost shared;
    private final RiceCoder.Cost[] own;
    private int observation;
    private int component;

    Region(int[][] symbols, boolean floats) {
      this.symbols = symbols;
      this.floats = floats;
      this.own = new RiceCoder.Cost[symbols.length];
      int all = 0;
      for (int k = 0; k < symbols.length; k++) {
        int largest = floats ? 0 : largestFolded(symbols[k]);
        own[k] = new RiceCoder.Cost(largest);
        all |= largest;
      }
      this.shared = new RiceCoder.Cost(all);
    }

    @Override
    public boolean isDone() {
      return symbols.length == 0 || observation == symbols[0].length;
    }

    @Override
    public Importance importance() {
      return Importance.FIRST;
    }

    @Override
    public byte @Nullable [] take(int room, boolean whole) {
      int left = symbols[0].length - observation;
      int header =
          BitWriter.varintBytes(REGION)
              + BitWriter.varintBytes(component)
              + BitWriter.varintBytes(symbols.length)
              + BitWriter.varintBytes(observation)
              + BitWriter.varintBytes(left);
      long bits = 8L * (room - header) - 1;
      if (component == 0) {
        int count = fittingObservations(bits);
        if (count > 0) {
          byte[] unit = write(symbols.length, count);
          observation += count;
          return unit;
        }
        if (!whole) {
          return null;
        }
      }
      return takeComponents(bits, whole);
    }

    /** Part of one observation that is too large for a packet. */
    private byte @Nullable [] takeComponents(long bits, boolean whole) {
      int left = symbols.length - component;
      int count = 0;
      clear();
      while (count < left) {
        add(component + count, observation, 1);
        if (least(component, count + 1) > bits) {
          add(component + count, observation, -1);
          break;
        }
        count++;
      }
      if (!isSensible(count, left, whole)) {
        return null;
      }
      byte[] unit = write(count, 1);
      component += count;
      if (component == symbols.length) {
        component = 0;
        observation++;
      }
      return unit;
    }

    private int fittingObservations(long bits) {
      clear();
      int count = 0;
      while (observation + count < symbols[0].length) {
        for (int k = 0; k < symbols.length; k++) {
          add(k, observation + count, 1);
        }
        if (leastFor(count + 1) > bits) {
          for (int k = 0; k < symbols.length; k++) {
            add(k, observation + count, -1);
          }
          break;
        }
        count++;
      }
      return count;
    }

    private void clear() {
      shared.clear();
      for (RiceCoder.Cost cost : own) {
        cost.clear();
      }
    }

    private void add(int k, int at, int sign) {
      if (floats) {
        return;
      }
      int folded = RiceCoder.fold(symbols[k][at]);
      if (sign > 0) {
        shared.add(folded);
        own[k].add(folded);
      } else {
        shared.remove(folded);
        own[k].remove(folded);
      }
    }

    private long leastFor(int observations) {
      return floats ? 32L * symbols.length * observations : least(0, symbols.length);
    }

    private long least(int from, int components) {
      return floats
          ? 32L * components
          : Math.min(PARAMETER_BITS + shared.least(), ownBits(from, components));
    }

    private long ownBits(int from, int components) {
      long bits = 0;
      for (int k = from; k < from + components; k++) {
        bits += PARAMETER_BITS + own[k].least();
      }
      return bits;
    }

    private byte[] write(int components, int observations) {
      boolean one = PARAMETER_BITS + shared.least() <= ownBits(component, components);
      BitWriter out = new BitWriter();
      out.writeVarint(REGION);
      out.writeVarint(component);
      out.writeVarint(components);
      out.writeVarint(observation);
      out.writeVarint(observations);
      out.write(one ? 1 : 0, 1);
      for (int k = component; k < component + components; k++) {
        int parameter = one ? shared.parameter() : own[k].parameter();
        if (!floats && (!one || k == component)) {
          out.write(parameter, PARAMETER_BITS);
        }
        for (int j = observation; j < observation + observations; j++) {
          if (floats) {
            out.write(symbols[k][j], 32);
          } else {
            RiceCoder.write(out, RiceCoder.fold(symbols[k][j]), parameter);
          }
        }
      }
      return out.toByteArray();
    }
  }
}
