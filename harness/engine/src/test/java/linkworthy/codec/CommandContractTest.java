package linkworthy.codec;

import java.util.List;

/** The contract, for programs that copy the picture's file; part of such a file is no picture. */
class CommandContractTest extends CodecContractTest {
  private static final String COPY =
      "command: {encode: [cp, '{input}', '{output}'], decode: [cp, '{input}', '{output}']}\n";

  @Override
  protected String family() {
    return "command";
  }

  @Override
  protected CodecFamilies families() {
    return CodecFamilies.installed().allowingCommands();
  }

  @Override
  protected List<String> entries() {
    return List.of(
        COPY + "on-loss: drop-picture", COPY + "label: copy", COPY + "on-loss: zero-fill");
  }

  /** Each damage starts a program; {@link CommandStreamTest} has the large numbers without. */
  @Override
  protected int damages() {
    return Math.min(400, super.damages());
  }

  @Override
  protected boolean packetsDecodeAlone() {
    return false;
  }
}
