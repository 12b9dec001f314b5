package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.BitSet;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import java.util.TreeMap;
import java.util.TreeSet;
import java.util.stream.IntStream;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import linkworthy.input.Kind;
import org.apache.commons.rng.UniformRandomProvider;
import org.assertj.core.api.ThrowableAssert.ThrowingCallable;
import org.junit.jupiter.api.Test;

/**
 * What every noise process keeps to. A process's own test extends this and gives its id and the
 * severities it refuses; the process itself is asked of the registry.
 */
public abstract class NoiseProcessContractTest {
  private static final int REPEATS = 200;
  private static final int PACKET = 16;

  /** Id under which the registry knows the process. */
  protected abstract String id();

  /** Severities that are refused whatever the picture. */
  protected abstract List<Severity> refused();

  /**
   * The mean squared error expected of the raw picture in mid range: the equivalent noise variance,
   * unless the process documents a difference.
   */
  protected double expectedError(double equivalentNoiseVariance) {
    return equivalentNoiseVariance;
  }

  /** The process under test; one that needs settings is set up here. */
  protected NoiseProcess process() {
    return NoiseProcesses.find(id());
  }

  /** The one severity of a process that cannot be set by SNR and variance. */
  protected Optional<Severity> onlySeverity() {
    return Optional.empty();
  }

  /** An SNR, or the one severity there is. */
  private Severity severity(double snrDb) {
    return onlySeverity().orElse(new Severity(Severity.SNR_DB, snrDb));
  }

  /** Whether the process has but one severity; then it refuses others. */
  private boolean hasOneSeverity() {
    if (onlySeverity().isPresent()) {
      Site site = process().sites().get(0);
      for (String axis : List.of(Severity.SNR_DB, Severity.VARIANCE)) {
        assertRefused(() -> process().check(new Severity(axis, 1), Map.of(), site), axis);
      }
    }
    return onlySeverity().isPresent();
  }

  private Impairment at(Severity severity, Site site, Picture picture) {
    return process().at(severity, Map.of(), site, SignalStatistics.of(picture));
  }

  /** Eight levels from 100 to 156, equally many of each: mean 128, variance 336. */
  private static Picture midRange() {
    int[] samples =
        IntStream.range(0, 64 * 64).map(i -> 100 + 8 * ((i + 3 * (i / 64)) & 7)).toArray();
    return new Picture(64, 64, 8, samples);
  }

  /** A ramp over all levels, black and white among them. */
  private static Picture ramp(int bitDepth) {
    int peak = (1 << bitDepth) - 1;
    int[] samples = IntStream.range(0, 64 * 64).map(i -> (int) ((long) i * peak / 4095)).toArray();
    return new Picture(64, 64, bitDepth, samples);
  }

  /** The picture that a receiver without any codec shows: the mean where samples are missing. */
  private static Picture shown(Impairment impairment, Picture clean, UniformRandomProvider random) {
    if (impairment instanceof Impairment.OnSamples onSamples) {
      return onSamples.apply(clean, random);
    }
    if (impairment instanceof Impairment.OnBits onBits) {
      return flipped(onBits.errors(random), clean);
    }
    Impairment.Losses losses = losses(impairment, random);
    int mean = (int) Math.floor(clean.mean() + 0.5);
    int[] samples = clean.samples().clone();
    for (int i = 0; i < samples.length; i++) {
      samples[i] = losses.lost(i / PACKET) ? mean : samples[i];
    }
    return new Picture(clean.width(), clean.height(), clean.bitDepth(), samples);
  }

  /** Fates of packets, or of nodes that each send one packet. */
  private static Impairment.Losses losses(Impairment impairment, UniformRandomProvider random) {
    return impairment instanceof Impairment.OnNodes onNodes
        ? onNodes.failures(random)
        : ((Impairment.OnPackets) impairment).losses(random);
  }

  /** Samples in natural binary, the most significant bit first, so many to a packet. */
  private static Picture flipped(Impairment.Errors errors, Picture clean) {
    int depth = clean.bitDepth();
    int[] samples = clean.samples().clone();
    for (int packet = 0; packet * PACKET < samples.length; packet++) {
      int first = packet * PACKET;
      errors.flipped(packet, PACKET * depth).stream()
          .forEach(bit -> samples[first + bit / depth] ^= 1 << (depth - 1 - bit % depth));
    }
    return new Picture(clean.width(), clean.height(), depth, samples);
  }

  private static void assertRefused(ThrowingCallable call, String named) {
    assertThatThrownBy(call)
        .isInstanceOf(BadInput.class)
        .satisfies(e -> assertThat(e.getMessage()).contains(named).doesNotContain("\n"));
  }

  @Test
  void describesEveryKeyOfItsOwn() {
    NoiseProcess process = NoiseProcesses.find(id());
    Set<String> described = new TreeSet<>();
    process.keys().forEach(key -> described.add(key.name()));
    Set<String> own = new TreeSet<>(process.axes());
    own.addAll(process().axes());
    own.removeAll(Set.of(Severity.SNR_DB, Severity.VARIANCE));
    own.addAll(process.parameters().keySet());
    own.addAll(process.settingKeys());
    assertThat(described).containsAll(own);
    described.removeAll(own);
    assertThat(described).as("axes that settings add").allMatch(name -> name.endsWith("-db"));
  }

  @Test
  void refusesParametersOutsideTheirDescription() {
    NoiseProcess process = process();
    for (Key key : process.keys()) {
      if (process.parameters().containsKey(key.name())) {
        assertThat(key.kind() instanceof Kind.Flag)
            .as(key.name())
            .isEqualTo(process.flags().contains(key.name()));
        if (key.kind() instanceof Kind.Real range) {
          for (double value : new double[] {Math.nextDown(range.min()), Math.nextUp(range.max())}) {
            Map<String, Double> parameters = new TreeMap<>(process.parameters());
            parameters.put(key.name(), value);
            assertThatExceptionOfType(BadInput.class)
                .as("%s %s", key.name(), value)
                .isThrownBy(() -> process.checkParameters(parameters, process.sites().get(0)));
          }
        }
      }
    }
  }

  @Test
  void registryKnowsTheProcessByItsId() {
    assertThat(NoiseProcesses.find(id())).hasSameClassAs(process());
    assertThat(process().id()).isEqualTo(id()).matches("[a-z][a-z0-9-]*");
    assertThat(process().revision()).isPositive();
    assertThat(process().summary()).isNotBlank().doesNotContain("\n");
    assertThat(process().sites()).isNotEmpty().doesNotHaveDuplicates();
    assertThat(process().parameters().keySet()).containsAll(process().flags());
    assertThat(process().settingKeys()).containsAll(process().fileKeys());
    assertThat(process().with(process().settings())).isEqualTo(process());
    if (!hasOneSeverity()) {
      assertThat(process().axes()).contains(Severity.SNR_DB, Severity.VARIANCE);
    }
  }

  @Test
  void snrAndVarianceMeanTheSame() {
    if (hasOneSeverity()) {
      return;
    }
    Picture picture = midRange();
    for (Site site : process().sites()) {
      for (double snr : new double[] {30, 12.5, 3}) {
        double variance = 336 / StrictMath.pow(10, snr / 10);
        Impairment bySnr = at(new Severity(Severity.SNR_DB, snr), site, picture);
        Impairment byVariance = at(new Severity(Severity.VARIANCE, variance), site, picture);
        assertThat(bySnr.equivalentNoiseVariance()).isCloseTo(variance, within(variance * 1e-12));
        assertThat(byVariance.equivalentNoiseVariance()).isEqualTo(variance);
      }
    }
  }

  @Test
  void signalPowerSetsTheSnr() {
    if (hasOneSeverity()) {
      return;
    }
    Picture picture = midRange();
    SignalStatistics signal = SignalStatistics.of(picture);
    SignalStatistics doubled =
        new SignalStatistics(
            2 * signal.power(), signal.mean(), signal.meanSquare(), signal.variance(), 255);
    for (Site site : process().sites()) {
      Severity severity = new Severity(Severity.SNR_DB, 20);
      double once = process().at(severity, Map.of(), site, signal).equivalentNoiseVariance();
      double twice = process().at(severity, Map.of(), site, doubled).equivalentNoiseVariance();
      assertThat(twice).isCloseTo(2 * once, within(once * 1e-12));
    }
  }

  @Test
  void sameStreamGivesTheSameResultAndTheCleanPictureStays() {
    Picture picture = ramp(8);
    int[] before = picture.samples().clone();
    for (Site site : process().sites()) {
      Impairment impairment = at(severity(8), site, picture);
      Picture one = shown(impairment, picture, Measured.stream(1));
      Picture same = shown(impairment, picture, Measured.stream(1));
      Picture other = shown(impairment, picture, Measured.stream(2));
      assertThat(same.samples()).isEqualTo(one.samples()).isNotEqualTo(other.samples());
      assertThat(one.samples()).isNotEqualTo(before);
    }
    assertThat(picture.samples()).isEqualTo(before);
  }

  @Test
  void samplesStayWithinTheirDepth() {
    for (int bitDepth : new int[] {8, 16}) {
      Picture picture = ramp(bitDepth);
      for (Site site : process().sites()) {
        Impairment impairment = at(severity(3), site, picture);
        Picture noisy = shown(impairment, picture, Measured.stream(3));
        assertThat(noisy.width()).isEqualTo(64);
        assertThat(noisy.height()).isEqualTo(64);
        assertThat(noisy.bitDepth()).isEqualTo(bitDepth);
        assertThat(Arrays.stream(noisy.samples()))
            .allMatch(sample -> sample >= 0 && sample <= picture.peak());
      }
    }
  }

  @Test
  void varianceZeroLeavesThePictureAlone() {
    if (hasOneSeverity()) {
      return;
    }
    for (Picture picture : new Picture[] {ramp(8), Measured.flat(9, 5, 8, 77)}) {
      for (Site site : process().sites()) {
        Impairment impairment = at(new Severity(Severity.VARIANCE, 0), site, picture);
        assertThat(impairment.equivalentNoiseVariance()).isZero();
        assertThat(shown(impairment, picture, Measured.stream(4)).samples())
            .isEqualTo(picture.samples());
      }
    }
  }

  /**
   * The mean over 200 independent realisations lies within 6 standard errors of what is expected:
   * Student's t with 199 degrees of freedom, false-alarm rate 9.2e-9 each, a few times that where
   * hits are few. Packets carry 16 samples.
   */
  @Test
  void measuredErrorIsTheEquivalentNoiseVariance() {
    Picture picture = midRange();
    for (Site site : process().sites()) {
      for (double snr : new double[] {15, 8}) {
        Impairment impairment = at(severity(snr), site, picture);
        double[] errors = new double[REPEATS];
        for (int i = 0; i < REPEATS; i++) {
          Picture noisy = shown(impairment, picture, Measured.stream(1000 + i));
          double[] squared = Measured.squaredErrors(picture, noisy);
          errors[i] = Measured.of(squared).mean();
        }
        Measured measured = Measured.of(errors);
        assertThat(measured.errorsFrom(expectedError(impairment.equivalentNoiseVariance())))
            .as("%s at %s dB: %s", site, snr, measured)
            .isBetween(-6.0, 6.0);
      }
    }
  }

  @Test
  void packetFatesDoNotDependOnWhoAsks() {
    for (Site site : process().sites()) {
      Impairment impairment = at(severity(5), site, midRange());
      if (site == Site.PACKETS) {
        Impairment.Losses all = losses(impairment, Measured.stream(6));
        List<Boolean> fates = new ArrayList<>();
        IntStream.range(0, 1000).forEach(i -> fates.add(all.lost(i)));
        assertThat(fates).contains(true, false);
        Impairment.Losses few = losses(impairment, Measured.stream(6));
        IntStream.range(0, 100).forEach(i -> assertThat(few.lost(i)).isEqualTo(fates.get(i)));
        Impairment.Losses backwards = losses(impairment, Measured.stream(6));
        IntStream.iterate(999, i -> i >= 0, i -> i - 7)
            .forEach(i -> assertThat(backwards.lost(i)).isEqualTo(fates.get(i)));
      }
    }
  }

  @Test
  void bitErrorsOfAPacketDependOnNoOtherPacketAndOnNoLength() {
    for (Site site : process().sites()) {
      Impairment impairment = at(severity(5), site, midRange());
      if (impairment instanceof Impairment.OnBits onBits) {
        Impairment.Errors all = onBits.errors(Measured.stream(6));
        List<BitSet> flips = IntStream.range(0, 300).mapToObj(i -> all.flipped(i, 2000)).toList();
        assertThat(flips).doesNotHaveDuplicates();
        Impairment.Errors others = onBits.errors(Measured.stream(6));
        for (int i = 299; i >= 0; i -= 7) {
          int bits = 6 * i;
          assertThat(others.flipped(i, bits)).isEqualTo(flips.get(i).get(0, bits));
        }
      }
    }
  }

  @Test
  void sitesGiveTheirKindOfImpairment() {
    for (Site site : process().sites()) {
      List<Class<? extends Impairment>> kinds =
          switch (site) {
            case SAMPLES -> List.of(Impairment.OnSamples.class);
            case PACKETS -> List.of(Impairment.OnPackets.class, Impairment.OnNodes.class);
            case BITS -> List.of(Impairment.OnBits.class);
          };
      Impairment found = at(severity(10), site, midRange());
      assertThat(kinds).filteredOn(kind -> kind.isInstance(found)).hasSize(1);
    }
  }

  @Test
  void badSeveritiesAreRefusedInOneLine() {
    SignalStatistics signal = SignalStatistics.of(midRange());
    List<Severity> bad = new ArrayList<>(refused());
    bad.add(new Severity(Severity.VARIANCE, -Double.MIN_VALUE));
    bad.add(new Severity(Severity.SNR_DB, 301));
    bad.add(new Severity("no-such-axis", 0.1));
    for (Site site : process().sites()) {
      for (Severity severity : bad) {
        assertRefused(() -> process().check(severity, Map.of(), site), severity.axis());
        assertRefused(() -> process().at(severity, Map.of(), site, signal), severity.axis());
      }
    }
  }

  @Test
  void snrOfAPictureWithoutPowerIsRefused() {
    if (hasOneSeverity()) {
      return;
    }
    SignalStatistics flat = SignalStatistics.of(Measured.flat(8, 8, 8, 128));
    for (Site site : process().sites()) {
      Severity severity = new Severity(Severity.SNR_DB, 20);
      assertRefused(() -> process().at(severity, Map.of(), site, flat), "signal power is 0");
    }
  }

  @Test
  void parametersAndSitesItDoesNotHaveAreRefused() {
    Severity severity = onlySeverity().orElse(new Severity(Severity.VARIANCE, 1));
    Site first = process().sites().get(0);
    assertRefused(
        () -> process().check(severity, Map.of("no-such-parameter", 1.0), first),
        "no-such-parameter");
    for (Site site : Site.values()) {
      if (!process().sites().contains(site)) {
        assertRefused(() -> process().check(severity, Map.of(), site), site.id());
      }
    }
    for (String name : process().parameters().keySet()) {
      Map<String, Double> parameters = new HashMap<>(process().parameters());
      parameters.put(name, Double.NaN);
      assertRefused(() -> process().check(severity, parameters, first), name);
    }
  }
}
