package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.catchThrowableOfType;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.concurrent.CancellationException;
import java.util.function.Supplier;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class CommandCodecTest {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);
  private static final Picture PATTERN = TestPattern.cvp(61, 45);
  private static final PictureShape SHAPE = PictureShape.of(PATTERN);
  private static final String COPY = "[cp, '{input}', '{output}']";

  @TempDir private Path folder;

  /** Unconfined even where bubblewrap works, as scripts leave what they found outside. */
  private static Codec codec(String encode, String decode, String more) {
    return codec(encode, decode, more, Confinement::none);
  }

  private static Codec codec(
      String encode, String decode, String more, Supplier<Confinement> confinement) {
    String entry = "command: {encode: " + encode + ", decode: " + decode + "}\n" + more;
    return CodecFamilies.installed()
        .allowingCommands(confinement)
        .read(YamlNode.parse("study.yaml", entry), LINK)
        .get(0);
  }

  /** A script with the input as $1 and the output as $2. */
  private static String script(String text) {
    return "[sh, -c, \"" + text + "\", sh, '{input}', '{output}']";
  }

  private static Failure encodeFailure(String script, String more) {
    return encodeFailure(codec(script(script), COPY, more));
  }

  private static Failure encodeFailure(Codec codec) {
    CodecFailure failure =
        catchThrowableOfType(CodecFailure.class, () -> codec.encode(PATTERN, new Memo()));
    assertThat(failure).isNotNull();
    return failure.failure();
  }

  private static Decoding decoded(String script, String more) {
    return decoded(codec(COPY, script(script), more));
  }

  private static Decoding decoded(Codec codec) {
    return codec.decode(SHAPE, codec.encode(PATTERN, new Memo()).payloads());
  }

  private static String word(Decoding decoding) {
    Failure failure = decoding.failure();
    return failure == null ? "" : failure.word();
  }

  /** A process that has ended has no command, even if nobody has asked for its exit code yet. */
  private static boolean isAtWork(long pid) {
    return ProcessHandle.of(pid).flatMap(process -> process.info().command()).isPresent();
  }

  private static long foldersLeft() throws IOException {
    try (Stream<Path> files = Files.list(Path.of(System.getProperty("java.io.tmpdir")))) {
      return files.filter(f -> String.valueOf(f.getFileName()).startsWith("linkworthy-")).count();
    }
  }

  @Test
  void picturesOfOneToSixteenBitsComeBackFromACopy() {
    Codec copy = codec(COPY, COPY, "");
    for (int bits : new int[] {1, 4, 7, 8, 9, 12, 16}) {
      int peak = (1 << bits) - 1;
      int[] samples = Arrays.stream(PATTERN.samples()).map(s -> s * peak / 255).toArray();
      Picture picture = new Picture(61, 45, bits, samples);
      Encoding encoding = copy.encode(picture, new Memo());
      Decoding decoding = copy.decode(PictureShape.of(picture), encoding.payloads());
      assertThat(decoding.failure()).as("%d bits", bits).isNull();
      assertThat(decoding.completeness()).isEqualTo(Decoding.Completeness.COMPLETE);
      assertThat(decoding.picture().samples()).isEqualTo(samples);
      assertThat(decoding.picture().bitDepth()).isEqualTo(bits);
    }
  }

  @Test
  void everyByteIsCountedAndTenBytesMoreForEachPacket() {
    Encoding encoding = codec(COPY, COPY, "").encode(PATTERN, new Memo());
    int file = "P5\n61 45\n255\n".length() + 61 * 45;
    int packets = (file + 85) / 86;
    assertThat(encoding.packets()).hasSize(packets);
    assertThat(encoding.payloadBits()).isEqualTo(8L * (file + 10 * packets));
    assertThat(encoding.keep()).isEqualTo(-1);
  }

  @Test
  void nothingRunsUnlessItIsAllowed() {
    String entry = "command: {encode: " + COPY + ", decode: " + COPY + "}";
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> CodecFamilies.installed().read(YamlNode.parse("study.yaml", entry), LINK))
        .withMessage(
            "study.yaml, line 1: 'command' runs programs of this machine (cp, cp); accepted: only"
                + " with --allow-commands");
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      quoteCharacter = '`',
      value = {
        "[bin/cp, '{input}', '{output}'] | begins with 'bin/cp'; accepted: a name on the PATH",
        "[cp, '{output}'] | has no {input}",
        "[cp, '{input}', x] | has no {output}",
        "[] | an empty list",
        "cp | a list",
        "[cp, '{input}', '{output}'], decoode: x | decode"
      })
  void aWrongCommandIsRefusedInOneLine(String encode, String complaint) {
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> codec(encode, COPY, ""))
        .withMessageContaining(complaint)
        .withMessageStartingWith("study.yaml, line 1: ");
  }

  @ParameterizedTest
  @CsvSource({"seconds: 0", "seconds: 3601", "memory-mib: 0", "output-bytes: 0", "on-loss: none"})
  void aLimitOutsideItsRangeIsRefused(String more) {
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> codec(COPY, COPY, more))
        .withMessageStartingWith("study.yaml, line 2: '" + more.split(":", 2)[0] + "' is ")
        .withMessageContaining("accepted");
  }

  @Test
  void aMissingProgramIsSaidBeforeAnythingRuns() {
    Codec missing = codec("[no-such-program, '{input}', '{output}']", COPY, "");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> missing.check(SHAPE))
        .withMessage(
            "codec 'command no-such-program truncate' runs 'no-such-program', which is not there;"
                + " accepted: a program that is on the PATH");
    assertThatExceptionOfType(CodecFailure.class)
        .isThrownBy(() -> missing.encode(PATTERN, new Memo()))
        .satisfies(e -> assertThat(e.failure().word()).isEqualTo("encode-start"));
    codec(COPY, COPY, "").check(SHAPE);
  }

  @Test
  void aFileThatIsNoProgramDoesNotStart() throws IOException {
    Path file = Files.writeString(folder.resolve("none"), "\0\1\2");
    assertThat(file.toFile().setExecutable(true)).isTrue();
    Codec codec = codec("['" + file + "', '{input}', '{output}']", COPY, "");
    assertThatExceptionOfType(CodecFailure.class)
        .isThrownBy(() -> codec.encode(PATTERN, new Memo()))
        .satisfies(e -> assertThat(e.failure().word()).isIn("encode-start", "encode-exit"));
  }

  @Test
  void anExitCodeIsAFailureWithWhatTheProgramSaid() {
    Failure failure = encodeFailure("echo no such bird >&2; exit 3", "");
    assertThat(failure.word()).isEqualTo("encode-exit");
    assertThat(failure.detail()).isEqualTo("exit code 3; it said: no such bird");
    Decoding decoding = decoded("exit 1", "");
    assertThat(word(decoding)).isEqualTo("decode-exit");
    assertThat(decoding.completeness()).isEqualTo(Decoding.Completeness.NOTHING);
    assertThat(decoding.picture().samples()).containsOnly(128);
  }

  @Test
  void aHangIsEndedWithAllItsProcesses() throws IOException {
    Path pids = folder.resolve("pids");
    String more = "seconds: 1";
    String script = "sleep 3600 & echo $! > " + pids + "; sleep 3600";
    assertThat(encodeFailure(script, more).word()).isEqualTo("encode-timeout");
    long background = Long.parseLong(Files.readString(pids).strip());
    assertThat(isAtWork(background)).isFalse();
    Decoding decoding = decoded("sleep 3600", more);
    assertThat(word(decoding)).isEqualTo("decode-timeout");
  }

  @Test
  void whatAProgramLeavesRunningIsEndedToo() throws IOException {
    Path pids = folder.resolve("pids");
    String script = "sleep 3600 & echo $! > " + pids + "; cp $1 $2";
    Encoding encoding = codec(script(script), COPY, "").encode(PATTERN, new Memo());
    assertThat(encoding.packets()).isNotEmpty();
    long background = Long.parseLong(Files.readString(pids).strip());
    assertThat(isAtWork(background)).isFalse();
  }

  /** Ten gigabytes with a limit of 100 000 bytes; less than 4 MB may have been written. */
  @ParameterizedTest
  @CsvSource({"head -c 10000000000 /dev/zero > $2", "head -c 10000000000 /dev/zero > scratch"})
  void aGiantOutputIsStoppedEarly(String script) {
    Failure failure = encodeFailure(script, "output-bytes: 100000");
    assertThat(failure.word()).isEqualTo("output-too-large");
    Matcher wrote = Pattern.compile("wrote (\\d+) bytes of 100000").matcher(failure.detail());
    assertThat(wrote.find()).isTrue();
    assertThat(Long.parseLong(wrote.group(1))).isBetween(100_001L, 4_000_000L);
  }

  @Test
  void megabytesOnStandardOutputAreDropped() {
    Decoding decoding = decoded("head -c 8000000 /dev/zero; cp $1 $2", "");
    assertThat(decoding.failure()).isNull();
    assertThat(decoding.picture().samples()).isEqualTo(PATTERN.samples());
    Failure failure = encodeFailure("head -c 8000000 /dev/zero | tr '\\\\0' x; exit 1", "");
    assertThat(failure.detail()).hasSizeLessThanOrEqualTo(300).contains("it said: xxx");
  }

  @Test
  void noOutputIsAFailure() {
    assertThat(encodeFailure("true", "").word()).isEqualTo("encode-empty");
    assertThat(encodeFailure("mkfifo $2", "").word()).isEqualTo("encode-empty");
    assertThat(encodeFailure("rm -rf $HOME", "").word()).isEqualTo("encode-empty");
  }

  @ParameterizedTest
  @CsvSource({
    "printf 'P5 2 2 255 abcd' > $2, decode-size",
    "printf 'P5 61 45 65535 ' > $2, decode-size",
    "printf 'P5 61 45 255 short' > $2, decode-unreadable",
    "echo hello > $2, decode-unreadable",
    "printf 'P5 16000000 16000000 255 ' > $2, decode-size",
    "true, decode-empty"
  })
  void aWrongPictureIsAnOutageWithItsReason(String script, String word) {
    Decoding decoding = decoded(script, "");
    assertThat(word(decoding)).isEqualTo(word);
    assertThat(PictureShape.of(decoding.picture())).isEqualTo(SHAPE);
    assertThat(decoding.picture().samples()).containsOnly(128);
  }

  @Test
  void argumentsReachTheProgramAsTheyAre() {
    String odd = "a  b;$(touch x)`id`|&<>*?\\\\'\\\"{other} {width}x{height} \u00e9";
    String script = "[sh, -c, 'printf \"%s\" \"$3\" > \"$2\"', sh, '{input}', '{output}', \"";
    Codec codec = codec(script + odd + "\"]", COPY, "");
    List<byte[]> packets = codec.encode(PATTERN, new Memo()).payloads();
    StringBuilder text = new StringBuilder();
    for (byte[] packet : packets) {
      text.append(new String(packet, 10, packet.length - 10, StandardCharsets.UTF_8));
    }
    assertThat(text).hasToString("a  b;$(touch x)`id`|&<>*?\\'\"{other} 61x45 \u00e9");
  }

  @Test
  void theEnvironmentIsPathAndAFolderOfItsOwn() {
    Codec codec =
        codec(
            script("env | cut -d= -f1 | sort > $2; pwd >> $2; echo $HOME $TMPDIR >> $2"), COPY, "");
    String text = "";
    for (byte[] packet : codec.encode(PATTERN, new Memo()).payloads()) {
      text += new String(packet, 10, packet.length - 10, StandardCharsets.UTF_8);
    }
    List<String> lines = text.lines().toList();
    assertThat(lines).contains("HOME", "LANG", "PATH", "TMPDIR");
    assertThat(lines.subList(0, lines.size() - 2))
        .isSubsetOf("HOME", "LANG", "PATH", "TMPDIR", "PWD", "OLDPWD", "SHLVL", "_");
    String own = lines.get(lines.size() - 2);
    assertThat(lines.get(lines.size() - 1)).isEqualTo(own + " " + own);
    assertThat(Path.of(own)).doesNotExist();
  }

  /** A link to a file of the user's, to the very output elsewhere, or to another folder. */
  @ParameterizedTest
  @ValueSource(
      strings = {
        "ln -s /etc/passwd $2",
        "cp $1 OUTSIDE; ln -s OUTSIDE $2",
        "ln -s nowhere $2",
        "mv $HOME OUTSIDE; ln -s OUTSIDE $HOME; cp OUTSIDE/picture.pgm $2"
      })
  void anOutputOverALinkIsRefused(String script) throws IOException {
    long before = foldersLeft();
    Path outside = folder.resolve("outside");
    String encode = script(script.replace("OUTSIDE", outside.toString()));
    Failure failure = encodeFailure(codec(encode, COPY, "", Confinement::ofThisMachine));
    assertThat(failure.word()).isIn("encode-outside", confined("encode-exit"));
    assertThat(foldersLeft()).isEqualTo(before);
    String decode = script("cp $1 " + outside + "x; ln -s " + outside + "x $2");
    Decoding decoding = decoded(codec(COPY, decode, "", Confinement::ofThisMachine));
    assertThat(word(decoding)).isEqualTo("decode-outside");
    assertThat(decoding.completeness()).isEqualTo(Decoding.Completeness.NOTHING);
  }

  /** A word that is right as well where programs are confined. */
  private static String confined(String word) {
    return Confinement.ofThisMachine().isOn() ? word : "";
  }

  /**
   * A program that writes elsewhere: the file is there only where nothing confines it. The call and
   * its cleaning work all the same.
   */
  @Test
  void aFileOutsideTheFolderDoesNotHinderTheCall() throws IOException {
    long before = foldersLeft();
    Path outside = folder.resolve("outside");
    String decode = script("cp $1 " + outside + "; mkdir -p a/b; chmod 0 a; cp $1 $2");
    Decoding decoding = decoded(codec(COPY, decode, "", Confinement::ofThisMachine));
    assertThat(decoding.failure()).isNull();
    assertThat(Files.exists(outside)).isEqualTo(!Confinement.ofThisMachine().isOn());
    assertThat(foldersLeft()).isEqualTo(before);
  }

  @Test
  void anInterruptedCallEndsItsProgram() {
    Codec codec = codec(script("sleep 3600"), COPY, "");
    Thread.currentThread().interrupt();
    assertThatExceptionOfType(CancellationException.class)
        .isThrownBy(() -> codec.encode(PATTERN, new Memo()));
    assertThat(Thread.interrupted()).isTrue();
  }

  @Test
  void lossesDoWhatTheStudySays() {
    String keep = script("cp $1 $2; printf %s $(wc -c < $1) >&2; exit 9");
    for (OnLoss onLoss : OnLoss.values()) {
      Codec codec = codec(COPY, keep, "on-loss: " + onLoss.id());
      List<byte[]> some = new ArrayList<>(codec.encode(PATTERN, new Memo()).payloads());
      some.remove(3);
      Decoding decoding = codec.decode(SHAPE, some);
      Failure failure = decoding.failure();
      String said = failure == null ? "" : failure.detail();
      switch (onLoss) {
        case TRUNCATE -> assertThat(said).endsWith("it said: " + 3 * 86);
        case ZERO_FILL ->
            assertThat(said).endsWith("it said: " + ("P5\n61 45\n255\n".length() + 61 * 45));
        case DROP_PICTURE -> assertThat(failure).isNull();
      }
    }
  }

  @Test
  void zerosStandWherePacketsAreMissing() {
    Codec codec = codec(COPY, COPY, "on-loss: zero-fill");
    List<byte[]> some = new ArrayList<>(codec.encode(PATTERN, new Memo()).payloads());
    some.remove(3);
    Decoding decoding = codec.decode(SHAPE, some);
    assertThat(decoding.completeness()).isEqualTo(Decoding.Completeness.PARTIAL);
    int[] expected = PATTERN.samples().clone();
    int head = "P5\n61 45\n255\n".length();
    Arrays.fill(expected, 3 * 86 - head, 4 * 86 - head, 0);
    assertThat(decoding.picture().samples()).isEqualTo(expected);
  }

  @Test
  void theFirstPacketMissingLeavesNothingToTruncate() {
    Codec codec = codec(COPY, COPY, "");
    List<byte[]> packets = codec.encode(PATTERN, new Memo()).payloads();
    Decoding decoding = codec.decode(SHAPE, packets.subList(1, packets.size()));
    assertThat(decoding.completeness()).isEqualTo(Decoding.Completeness.NOTHING);
    assertThat(decoding.failure()).isNull();
  }

  @Test
  void theMemoryOfAProgramIsLimited() {
    String more = "memory-mib: 64";
    assertThat(
            encodeFailure("head -c 400000000 /dev/zero | tail -n 1 | wc -c; exit 4", more).word())
        .isEqualTo("encode-exit");
    assertThat(encodeFailure("ulimit -v; exit 4", more).detail())
        .contains(CommandRun.find("prlimit").isPresent() ? "it said: 65536" : "it said: unlimited");
  }
}
