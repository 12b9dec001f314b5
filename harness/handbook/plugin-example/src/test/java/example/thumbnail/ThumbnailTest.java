package example.thumbnail;

import java.util.List;
import linkworthy.codec.CodecContractTest;

/** The promises that every codec makes, checked on this one. */
class ThumbnailTest extends CodecContractTest {
  @Override
  protected String family() {
    return "thumbnail";
  }

  @Override
  protected List<String> entries() {
    return List.of("thumbnail: 2", "thumbnail: 4", "thumbnail: 8\nlabel: small");
  }
}
