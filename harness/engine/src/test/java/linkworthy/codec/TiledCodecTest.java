package linkworthy.codec;

import java.util.List;

/** The contract, for tiles alone. */
class TiledCodecTest extends CodecContractTest {
  @Override
  protected String family() {
    return "transform";
  }

  @Override
  protected List<String> entries() {
    return List.of(
        "transform: pca\nover: tiles\ngrid: 3x2\nkeep: [1, 5]\nstep: 8",
        "transform: dct\nover: tiles\ngrid: 2x1\nkeep: 9\nstep: none",
        "transform: mean\nover: tiles\ngrid: 4x4\nstep: 16",
        "transform: dct\nover: tiles\ngrid: 1x3\nbits-per-pixel: 1");
  }
}
