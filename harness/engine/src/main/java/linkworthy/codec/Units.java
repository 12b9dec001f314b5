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
 * Without a quantiser there are neither steps nor parameters, and each value is a 32-bit float. In
 * streams of mostly zeros, values of a component are as {@link SparseCoder} has them.
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
    private final @Nullable RiceCosts costs;
    private final int fixedBits;
    private final @Nullable Quantizer step;
    private final Importance importance;
    private int done;

    /**
     * @param costs of the symbols as Rice codes; null where each takes {@code fixedBits}
     */
    private Run(
        int code,
        int[] symbols,
        @Nullable RiceCosts costs,
        int fixedBits,
        @Nullable Quantizer step,
        Importance importance) {
      this.importance = importance;
      this.code = code;
      this.symbols = symbols;
      this.costs = costs;
      this.fixedBits = fixedBits;
      this.step = step;
    }

    static Run ofMeans(int[] means, int bitDepth) {
      return new Run(MEANS, means, null, bitDepth, null, Importance.HEADER);
    }

    static Run ofDirection(int k, Symbols symbols, Quantizer quantizer) {
      return quantizer.isNone()
          ? new Run(codeOfDirection(k), symbols.direction(k), null, 32, null, Importance.BASIS)
          : new Run(
              codeOfDirection(k),
              symbols.direction(k),
              symbols.directionCosts(k),
              0,
              symbols.directionQuantizer(k),
              Importance.BASIS);
    }

    static Run ofComponent(int k, int kept, Symbols symbols, Quantizer quantizer) {
      return new Run(
          codeOfComponent(k),
          symbols.component(k),
          quantizer.isNone() ? null : symbols.componentCosts(k),
          quantizer.isNone() ? 32 : 0,
          null,
          k < Math.max(1, kept / 4) ? Importance.FIRST : Importance.REST);
    }

    static Run ofFloats(int k, int[] bits, Importance importance) {
      return new Run(codeOfComponent(k), bits, null, 32, null, importance);
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
    public Packetizer.@Nullable Unit take(int room, boolean whole) {
      int left = symbols.length - done;
      int count = fitting(8L * (room - headerBytes(done, left)));
      if (!isSensible(count, left, whole)) {
        return null;
      }
      RunUnit unit = new RunUnit(this, done, done + count);
      done += count;
      return unit;
    }

    private int headerBytes(int from, int count) {
      return BitWriter.varintBytes(code)
          + BitWriter.varintBytes(from)
          + BitWriter.varintBytes(count)
          + (step == null ? 0 : Float.BYTES);
    }

    private int fitting(long bits) {
      return costs == null
          ? (int) Math.max(0, Math.min(symbols.length - done, bits / fixedBits))
          : costs.fitting(done, bits - PARAMETER_BITS);
    }

    private int unitBytes(int from, int to) {
      long bits =
          costs == null ? (long) fixedBits * (to - from) : PARAMETER_BITS + costs.least(from, to);
      return headerBytes(from, to - from) + (int) ((bits + 7) / 8);
    }

    private byte[] write(int from, int to) {
      BitWriter out = new BitWriter();
      out.writeVarint(code);
      out.writeVarint(from);
      out.writeVarint(to - from);
      if (step != null) {
        out.write(Float.floatToRawIntBits((float) step.step()), 32);
      }
      if (costs == null) {
        for (int i = from; i < to; i++) {
          out.write(symbols[i], fixedBits);
        }
      } else {
        int parameter = costs.parameter(from, to);
        out.write(parameter, PARAMETER_BITS);
        for (int i = from; i < to; i++) {
          RiceCoder.write(out, RiceCoder.fold(symbols[i]), parameter);
        }
      }
      return out.toByteArray();
    }
  }

  /** Values {@code from} to {@code to} of a run. */
  private record RunUnit(Run run, int from, int to, int length) implements Packetizer.Unit {
    RunUnit(Run run, int from, int to) {
      this(run, from, to, run.unitBytes(from, to));
    }

    @Override
    public byte[] bytes() {
      return run.write(from, to);
    }
  }

  /** A component most of whose values may be zero. */
  static final class Sparse implements Packetizer.Strip {
    private final int code;
    private final int[] symbols;
    private final Importance importance;
    private final SparseCoder.Cost cost;
    private int done;

    Sparse(int k, int[] symbols, Importance importance) {
      this.code = codeOfComponent(k);
      this.symbols = symbols;
      this.importance = importance;
      this.cost = new SparseCoder.Cost(largestFolded(symbols));
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
    public Packetizer.@Nullable Unit take(int room, boolean whole) {
      int left = symbols.length - done;
      int header =
          BitWriter.varintBytes(code) + BitWriter.varintBytes(done) + BitWriter.varintBytes(left);
      int count = fitting(8L * (room - header));
      if (!isSensible(count, left, whole)) {
        return null;
      }
      BitWriter out = new BitWriter();
      out.writeVarint(code);
      out.writeVarint(done);
      out.writeVarint(count);
      SparseCoder.write(out, symbols, done, done + count, cost);
      done += count;
      return Packetizer.Unit.of(out.toByteArray());
    }

    /** How many values fit; their cost is what {@link #cost} then holds. */
    private int fitting(long bits) {
      cost.clear();
      int count = 0;
      while (done + count < symbols.length) {
        cost.add(RiceCoder.fold(symbols[done + count]));
        if (cost.least() > bits) {
          cost.clear();
          for (int i = done; i < done + count; i++) {
            cost.add(RiceCoder.fold(symbols[i]));
          }
          break;
        }
        count++;
      }
      return count;
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
    public Packetizer.@Nullable Unit take(int room, boolean whole) {
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
          Packetizer.Unit unit = write(symbols.length, count);
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
    private Packetizer.@Nullable Unit takeComponents(long bits, boolean whole) {
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
      Packetizer.Unit unit = write(count, 1);
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

    private Packetizer.Unit write(int components, int observations) {
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
      return Packetizer.Unit.of(out.toByteArray());
    }
  }
}
