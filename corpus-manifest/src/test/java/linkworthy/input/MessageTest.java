package linkworthy.input;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.AccessDeniedException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.FileSystemException;
import java.nio.file.NoSuchFileException;
import org.junit.jupiter.api.Test;

class MessageTest {
  @Test
  void messagesAreOnePrintableLine() {
    String text = "a\r\nb\t\u001b[2J\u0085\u2028\u2029 \u00e9\u4e2d <b>";
    String expected = "a\\u000d\\u000ab\\u0009\\u001b[2J\\u0085\\u2028\\u2029 \u00e9\u4e2d <b>";
    assertThat(new BadInput(text).getMessage()).isEqualTo(expected);
    assertThat(new Unavailable(text).getMessage()).isEqualTo(expected);
    IOException cause = new IOException("x");
    assertThat(new BadInput(text, cause)).hasMessage(expected).hasCause(cause);
    assertThat(new Unavailable(text, cause)).hasMessage(expected).hasCause(cause);
  }

  @Test
  void environmentTroubleHasAReadableReason() {
    assertThat(Unavailable.cannot("write r.csv", new AccessDeniedException("r.csv")))
        .hasMessage("cannot write r.csv: permission denied");
    assertThat(
            Unavailable.cannot(
                "write r.csv", new FileSystemException("r.csv", null, "No space left on device")))
        .hasMessage("cannot write r.csv: No space left on device");
    assertThat(Unavailable.cannot("write r.csv", new FileSystemException("r.csv")))
        .hasMessage("cannot write r.csv: FileSystemException");
    assertThat(Unavailable.cannot("write r.csv", new IOException("No space left on device")))
        .hasMessage("cannot write r.csv: No space left on device");
    assertThat(Unavailable.cannot("write r.csv", new IOException()))
        .hasMessage("cannot write r.csv: IOException");
    assertThat(Unavailable.cannot("write a/r.csv", new NoSuchFileException("a/r.csv.part")))
        .hasMessage("cannot write a/r.csv: no such file or folder");
    assertThat(Unavailable.cannot("write a/r.csv", new FileAlreadyExistsException("a")))
        .hasMessage("cannot write a/r.csv: there is a file of that name in the way");
  }
}
