package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.util.concurrent.CompletableFuture;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import org.junit.jupiter.api.Test;

class AwaitedTest {
  private static void assertThrown(Throwable thrown) {
    assertThatThrownBy(() -> Awaited.result(CompletableFuture.failedFuture(thrown)))
        .isSameAs(thrown);
  }

  @Test
  void theResultOfATaskIsHandedOver() {
    assertThat(Awaited.result(CompletableFuture.completedFuture("done"))).isEqualTo("done");
  }

  @Test
  void whatATaskThrewIsThrownAgain() {
    assertThrown(new BadInput("no such picture"));
    assertThrown(new StackOverflowError());
  }

  @Test
  void aCheckedExceptionIsTheCauseOfAnotherOne() {
    IOException checked = new IOException("gone");
    assertThatThrownBy(() -> Awaited.result(CompletableFuture.failedFuture(checked)))
        .isInstanceOf(IllegalStateException.class)
        .hasCause(checked);
  }

  @Test
  void anInterruptedThreadStaysInterrupted() {
    Thread.currentThread().interrupt();
    assertThatThrownBy(() -> Awaited.result(new CompletableFuture<String>()))
        .isInstanceOf(Unavailable.class)
        .hasMessage("interrupted");
    assertThat(Thread.interrupted()).isTrue();
  }
}
