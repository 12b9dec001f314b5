package linkworthy.link;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
import linkworthy.input.Require;
import linkworthy.input.Spelling;
import linkworthy.input.YamlNode;
import org.jspecify.annotations.Nullable;

/**
 * What a node's work costs it: the energy of computing, sending and receiving, and what it has of
 * memory, bit rate and battery.
 *
 * @param id lower-case letters, digits and hyphens
 * @param sentNanojoules energy to send a bit, in nanojoules
 * @param receivedNanojoules energy to receive a bit, in nanojoules
 * @param macNanojoules energy of one multiply-accumulate, in nanojoules
 * @param sleepMilliwatts power between pictures, in milliwatts
 * @param ramKib working memory that a codec may use, in KiB
 * @param kilobitsPerSecond bit rate on the air, in kbit/s
 * @param batteryJoules usable energy of the battery, in joules
 * @param source where the numbers come from
 * @param radio the model that the energy to send a bit follows from; null where it is given itself
 * @param gapMicroseconds time that the air is kept free for each packet: interframe space and
 *     back-off
 * @param turnaroundMicroseconds time from a packet to its acknowledgement
 */
public record NodeProfile(
    String id,
    double sentNanojoules,
    double receivedNanojoules,
    double macNanojoules,
    double sleepMilliwatts,
    double ramKib,
    double kilobitsPerSecond,
    double batteryJoules,
    String source,
    @Nullable Radio radio,
    double gapMicroseconds,
    double turnaroundMicroseconds) {
  private static final String ID = "[a-z][a-z0-9-]{0,63}";
  private static final String FOLDER = "/linkworthy/noise/library/nodes/";

  /** No node comes near it, and no cost of a trial grows from it beyond what a double holds. */
  private static final double MOST = 1e12;

  private static final Kind.Real NOT_NEGATIVE = Kind.Real.from(0, MOST, "a number from 0 to 1e12");
  private static final Kind.Real POSITIVE =
      Kind.Real.from(1 / MOST, MOST, "a number from 1e-12 to 1e12");

  /** What a profile file holds. */
  public static final KeyGroup KEYS =
      KeyGroup.of(
          "node-profile",
          Key.required(
              "id",
              new Kind.Text(ID, "lower-case letters, digits and hyphens, a letter first"),
              "name in reports"),
          Key.required(
              "sent-nj-per-bit",
              new Kind.GroupOr(Radio.KEYS, NOT_NEGATIVE),
              "energy to send a bit, nJ"),
          Key.required("received-nj-per-bit", NOT_NEGATIVE, "energy to receive a bit, nJ"),
          Key.required("mac-nj", NOT_NEGATIVE, "energy of a multiply-accumulate, nJ"),
          Key.required("sleep-mw", NOT_NEGATIVE, "power between pictures, mW"),
          Key.required("ram-kib", POSITIVE, "working memory, KiB"),
          Key.required("kbit-per-second", POSITIVE, "bit rate on the air, kbit/s"),
          Key.optional(
              "gap-us",
              NOT_NEGATIVE,
              "`0`",
              "time kept free for each packet, interframe space and back-off, µs"),
          Key.optional(
              "turnaround-us",
              NOT_NEGATIVE,
              "`0`",
              "time from a packet to its acknowledgement, µs"),
          Key.required("battery-j", POSITIVE, "usable energy of the battery, J"),
          Key.required("source", Kind.Text.any(), "where the numbers come from"),
          Key.optional("notes", Kind.Text.any(), "none", "what else a reader should know"));

  /**
   * @throws IllegalArgumentException if a figure is negative or not finite, or the memory, bit rate
   *     or battery is 0, or the energy to send a bit is not that of the radio
   */
  public NodeProfile {
    Require.notNegative(sentNanojoules, "sent-nj-per-bit (nJ)");
    Require.notNegative(receivedNanojoules, "received-nj-per-bit (nJ)");
    Require.notNegative(macNanojoules, "mac-nj (nJ)");
    Require.notNegative(sleepMilliwatts, "sleep-mw (mW)");
    Require.positive(ramKib, "ram-kib (KiB)");
    Require.positive(kilobitsPerSecond, "kbit-per-second (kbit/s)");
    Require.positive(batteryJoules, "battery-j (J)");
    Require.notNegative(gapMicroseconds, "gap-us (µs)");
    Require.notNegative(turnaroundMicroseconds, "turnaround-us (µs)");
    if (radio != null && radio.sentNanojoules() != sentNanojoules) {
      throw new IllegalArgumentException(
          "sent-nj-per-bit is " + sentNanojoules + " and the radio's " + radio.sentNanojoules());
    }
  }

  /** A profile that gives the energy to send a bit itself, and says nothing of pauses. */
  public NodeProfile(
      String id,
      double sentNanojoules,
      double receivedNanojoules,
      double macNanojoules,
      double sleepMilliwatts,
      double ramKib,
      double kilobitsPerSecond,
      double batteryJoules,
      String source) {
    this(
        id,
        sentNanojoules,
        receivedNanojoules,
        macNanojoules,
        sleepMilliwatts,
        ramKib,
        kilobitsPerSecond,
        batteryJoules,
        source,
        null,
        0,
        0);
  }

  /**
   * A radio whose amplifier has two regimes: a bit over d metres costs {@code electronics + near
   * d^2} up to {@code d0 = sqrt(near / far)}, where the two meet, and {@code electronics + far d^4}
   * beyond (Heinzelman, Chandrakasan and Balakrishnan, IEEE Transactions on Wireless Communications
   * 1(4), 2002, from memory: free space, then two-ray ground propagation).
   *
   * @param electronicsNanojoules nanojoules a bit, from 0
   * @param nearPicojoules picojoules a bit and square metre, above 0
   * @param farPicojoules picojoules a bit and metre to the fourth, above 0
   * @param metres distance, from 0
   */
  public record Radio(
      double electronicsNanojoules, double nearPicojoules, double farPicojoules, double metres) {
    /** The keys of a radio. */
    public static final KeyGroup KEYS =
        KeyGroup.of(
            "radio",
            Key.required(
                "electronics-nj", NOT_NEGATIVE, "energy of a bit before the amplifier, nJ"),
            Key.required(
                "near-pj-per-m2", POSITIVE, "amplifier up to √(near/far) m, pJ a bit and m²"),
            Key.required("far-pj-per-m4", POSITIVE, "amplifier beyond, pJ a bit and m⁴"),
            Key.required("distance-m", NOT_NEGATIVE, "metres to the receiver"));

    public Radio {
      Require.notNegative(electronicsNanojoules, "electronics-nj (nJ)");
      Require.positive(nearPicojoules, "near-pj-per-m2 (pJ/m^2)");
      Require.positive(farPicojoules, "far-pj-per-m4 (pJ/m^4)");
      Require.notNegative(metres, "distance-m (m)");
    }

    private static Radio parse(YamlNode group) {
      return new Radio(
          NOT_NEGATIVE.read(group.get("electronics-nj")),
          POSITIVE.read(group.get("near-pj-per-m2")),
          POSITIVE.read(group.get("far-pj-per-m4")),
          NOT_NEGATIVE.read(group.get("distance-m")));
    }

    private Map<String, Object> settings() {
      Map<String, Object> settings = new LinkedHashMap<>();
      settings.put("electronics-nj", electronicsNanojoules);
      settings.put("near-pj-per-m2", nearPicojoules);
      settings.put("far-pj-per-m4", farPicojoules);
      settings.put("distance-m", metres);
      return settings;
    }

    /** The distance d0 at which the regimes meet, in metres. */
    public double crossoverMetres() {
      return Math.sqrt(nearPicojoules / farPicojoules);
    }

    /** Energy to send a bit, in nanojoules. */
    public double sentNanojoules() {
      double squared = metres * metres;
      return electronicsNanojoules
          + (metres <= crossoverMetres()
                  ? nearPicojoules * squared
                  : farPicojoules * squared * squared)
              / 1000;
    }
  }

  /** Ids of the shipped profiles. */
  public static List<String> shipped() {
    return resource("index.txt").lines().filter(line -> !line.isBlank()).toList();
  }

  /**
   * A shipped profile.
   *
   * @throws BadInput if there is none with this id; the nearest is named
   */
  public static NodeProfile find(String id) {
    if (!shipped().contains(id)) {
      throw new BadInput("no node profile '" + id + "'; " + Spelling.hint(id, shipped()));
    }
    return parse(YamlNode.parse(id + ".yaml", resource(id + ".yaml")));
  }

  /**
   * Reads a profile file.
   *
   * @throws BadInput if it cannot be used; one line with file, line and key
   */
  public static NodeProfile read(Path file) {
    return parse(YamlNode.read(file));
  }

  /**
   * Reads the keys of a profile.
   *
   * @throws BadInput if they cannot be used; one line with file, line and key
   */
  public static NodeProfile parse(YamlNode root) {
    KEYS.check(root);
    YamlNode sent = root.get("sent-nj-per-bit");
    Radio radio = sent.isMapping() ? Radio.parse(sent) : null;
    return new NodeProfile(
        root.get("id").text(),
        radio == null ? NOT_NEGATIVE.read(sent) : radio.sentNanojoules(),
        NOT_NEGATIVE.read(root.get("received-nj-per-bit")),
        NOT_NEGATIVE.read(root.get("mac-nj")),
        NOT_NEGATIVE.read(root.get("sleep-mw")),
        POSITIVE.read(root.get("ram-kib")),
        POSITIVE.read(root.get("kbit-per-second")),
        POSITIVE.read(root.get("battery-j")),
        root.get("source").text(),
        radio,
        pause(root, "gap-us"),
        pause(root, "turnaround-us"));
  }

  private static double pause(YamlNode root, String key) {
    return root.find(key).map(NOT_NEGATIVE::read).orElse(0.0);
  }

  /** The profile as a file writes it, in a fixed order. */
  public Map<String, Object> settings() {
    Map<String, Object> settings = new LinkedHashMap<>();
    settings.put("id", id);
    settings.put("sent-nj-per-bit", radio == null ? sentNanojoules : radio.settings());
    settings.put("received-nj-per-bit", receivedNanojoules);
    settings.put("mac-nj", macNanojoules);
    settings.put("sleep-mw", sleepMilliwatts);
    settings.put("ram-kib", ramKib);
    settings.put("kbit-per-second", kilobitsPerSecond);
    if (gapMicroseconds > 0) {
      settings.put("gap-us", gapMicroseconds);
    }
    if (turnaroundMicroseconds > 0) {
      settings.put("turnaround-us", turnaroundMicroseconds);
    }
    settings.put("battery-j", batteryJoules);
    settings.put("source", source);
    return settings;
  }

  private static String resource(String name) {
    try (InputStream in = NodeProfile.class.getResourceAsStream(FOLDER + name)) {
      return new String(Objects.requireNonNull(in, name).readAllBytes(), StandardCharsets.UTF_8);
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  /** Energy of a node's work on one picture, in millijoules. */
  public double millijoules(long macs, long sentBits, long receivedBits) {
    return (macs * macNanojoules + sentBits * sentNanojoules + receivedBits * receivedNanojoules)
        / 1e6;
  }

  /**
   * Time that bits take on the air, with the pauses between packets, in milliseconds. An exchange
   * of a packet and its acknowledgement is the packet, the turnaround, the acknowledgement and the
   * gap; where the acknowledgement does not come, its length is left out.
   *
   * @param transmissions packets, each with its gap
   * @param awaited those of them that an acknowledgement was awaited for
   */
  public double airTimeMs(long bits, long transmissions, long awaited) {
    return bits / kilobitsPerSecond
        + (transmissions * gapMicroseconds + awaited * turnaroundMicroseconds) / 1000;
  }

  /**
   * Pictures that a full battery lasts for.
   *
   * @param millijoules energy of one picture
   * @param intervalSeconds time from one picture to the next, spent asleep
   */
  public double picturesPerBattery(double millijoules, double intervalSeconds) {
    return batteryJoules * 1e3 / (millijoules + sleepMilliwatts * intervalSeconds);
  }
}
