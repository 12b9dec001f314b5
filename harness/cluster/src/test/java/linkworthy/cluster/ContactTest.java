package linkworthy.cluster;

import static org.assertj.core.api.Assertions.assertThatCode;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.net.InetAddress;
import java.net.ServerSocket;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Which masters answer, and which Spark will do. */
class ContactTest {
  private static ServerSocket listen() throws IOException {
    return new ServerSocket(0, 1, InetAddress.getLoopbackAddress());
  }

  @Test
  void oneOfSeveralMastersIsEnough() throws IOException {
    try (ServerSocket socket = listen()) {
      String there = "127.0.0.1:" + socket.getLocalPort();
      assertThatCode(() -> Contact.require("spark://127.0.0.1:1," + there))
          .doesNotThrowAnyException();
    }
  }

  @ParameterizedTest
  @ValueSource(strings = {"local", "local[2]", "local[*]", "yarn", "k8s://https://host:1"})
  void otherMastersAreLeftToSpark(String master) {
    assertThatCode(() -> Contact.require(master)).doesNotThrowAnyException();
  }

  @Test
  void aMasterThatDoesNotAnswerIsNamed() throws IOException {
    int port;
    try (ServerSocket socket = listen()) {
      port = socket.getLocalPort();
    }
    String master = "spark://127.0.0.1:" + port;
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> Contact.require(master))
        .withMessage(
            "no Spark master answers at "
                + master
                + ": Connection refused; accepted: the address that the master's log names,"
                + " spark://HOST:PORT");
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> Contact.require("spark://no-such-host.invalid:7077"))
        .withMessageContaining("there is no host 'no-such-host.invalid'");
  }

  @ParameterizedTest
  @ValueSource(strings = {"spark://", "spark://host", "spark://host:0", "spark://host:70000"})
  void whatIsNoAddressIsRefused(String master) {
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> Contact.require(master))
        .withMessage(
            "the master is '"
                + master
                + "'; accepted: spark://HOST:PORT, local[N], yarn, k8s://...");
  }

  @ParameterizedTest
  @ValueSource(strings = {"4.1.0 2.13.16", "4.1.3 2.13.17", "4.2.0-preview 2.13.18", "4.10.1 2.13"})
  void thisSparkWillDo(String versions) {
    String[] both = versions.split(" ", -1);
    assertThatCode(() -> SparkVersion.require(both[0], both[1])).doesNotThrowAnyException();
  }

  @ParameterizedTest
  @ValueSource(
      strings = {"3.5.6 2.13.8", "3.5.6 2.12.18", "4.0.1 2.13.16", "5.0.0 2.13.1", "4.1.0 3.3"})
  void anotherSparkWillNot(String versions) {
    String[] both = versions.split(" ", -1);
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> SparkVersion.require(both[0], both[1]))
        .withMessage(
            "this is Spark "
                + both[0]
                + " for Scala "
                + both[1]
                + "; accepted: Spark 4.1 or a later 4, built for Scala 2.13");
  }
}
