package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import org.junit.jupiter.api.Test;

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

  @Test
  void moreTilesThanSamplesAreRefused() {
    Codec codec =
        CodecFamilies.installed()
            .read(
                YamlNode.parse("test", "transform: pca\nover: tiles\ngrid: 16x16\nkeep: 4"),
                new Link(96, 23, Link.Order.BY_COMPONENT))
            .get(0);
    assertThatThrownBy(() -> codec.check(new PictureShape(40, 15, 8)))
        .isInstanceOf(BadInput.class)
        .hasMessage(
            "codec 'pca tiles16x16 K4 step8' cuts 16 x 16 tiles, and the picture has 40 x 15"
                + " samples; accepted: at most one tile for each sample across and down");
  }
}
