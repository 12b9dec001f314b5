package linkworthy.bench;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.lang.management.ManagementFactory;
import java.lang.management.ThreadInfo;
import java.lang.management.ThreadMXBean;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import jdk.jfr.Recording;
import jdk.jfr.consumer.RecordedEvent;
import jdk.jfr.consumer.RecordedFrame;
import jdk.jfr.consumer.RecordingFile;
import linkworthy.results.TrialsCsv;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Plan;

/**
 * Processor time of each stage of a study on one thread. Flight Recorder looks at the thread's
 * stack every few milliseconds; a sample belongs to the stage whose method is innermost on it. A
 * stage's time is its share of the samples times the processor time of the thread, so a busy
 * machine stretches nothing. A share s of n samples has the standard error sqrt(s (1 - s) / n).
 */
final class StageTimes {
  private static final String SAMPLE = "jdk.ExecutionSample";
  private static final Duration PERIOD = Duration.ofMillis(2);
  private static final String WORKERS = "pool-";

  private final Plan plan;
  private final List<String> stages;
  private final Map<String, String> stageOfPlace;
  private final ThreadMXBean threads = ManagementFactory.getThreadMXBean();
  private long packets;

  /**
   * @param stageOfPlace stage by class and method, as in {@code codec.Analysis.project}, or by
   *     class
   */
  StageTimes(Plan plan, List<String> stages, Map<String, String> stageOfPlace) {
    this.plan = plan;
    this.stages = stages;
    this.stageOfPlace = stageOfPlace;
  }

  /**
   * What was seen.
   *
   * @param samples of each stage, in the order of the stages
   * @param others samples of none
   * @param seconds processor time of one pass
   * @param packets sent in one pass
   */
  record Seen(Map<String, Integer> samples, int others, double seconds, long packets) {
    int all() {
      return others + samples.values().stream().mapToInt(Integer::intValue).sum();
    }

    double share(String stage) {
      return (double) samples.getOrDefault(stage, 0) / all();
    }
  }

  /** Runs the study once to warm up and then as often as asked. */
  Seen run(int passes) {
    double unused = pass();
    double seconds = 0;
    try (Recording recording = new Recording()) {
      recording.enable(SAMPLE).withPeriod(PERIOD);
      recording.start();
      for (int i = 0; i < passes; i++) {
        seconds += pass();
      }
      recording.stop();
      Path file = Files.createTempFile("stages", ".jfr");
      try {
        recording.dump(file);
        return counted(RecordingFile.readAllEvents(file), seconds / passes);
      } finally {
        Files.delete(file);
      }
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  /** One pass; the processor time of its worker, in seconds. */
  private double pass() {
    long[] nanoseconds = new long[1];
    packets = 0;
    int units =
        new LocalRunner(plan, 1)
            .run(
                0,
                (unit, rows, timings) -> {
                  nanoseconds[0] = Math.max(nanoseconds[0], workerTime());
                  rows.forEach(row -> packets += row.packetsSent());
                  if (TrialsCsv.text(rows).isEmpty()) {
                    throw new IllegalStateException("no rows of unit " + unit.index());
                  }
                });
    if (units != plan.units()) {
      throw new IllegalStateException(units + " of " + plan.units() + " units were run");
    }
    return nanoseconds[0] / 1e9;
  }

  private long workerTime() {
    long time = 0;
    for (ThreadInfo info : threads.getThreadInfo(threads.getAllThreadIds())) {
      if (info != null && info.getThreadName().startsWith(WORKERS)) {
        time = Math.max(time, threads.getThreadCpuTime(info.getThreadId()));
      }
    }
    return time;
  }

  private Seen counted(List<RecordedEvent> events, double seconds) {
    Map<String, Integer> samples = new LinkedHashMap<>();
    stages.forEach(stage -> samples.put(stage, 0));
    int others = 0;
    for (RecordedEvent event : events) {
      if (event.getEventType().getName().equals(SAMPLE)
          && event.getThread("sampledThread").getJavaName().startsWith(WORKERS)) {
        String stage = stage(event.getStackTrace().getFrames());
        if (stage.isEmpty()) {
          others++;
        } else {
          samples.merge(stage, 1, Integer::sum);
        }
      }
    }
    return new Seen(samples, others, seconds, packets);
  }

  private String stage(List<RecordedFrame> frames) {
    for (RecordedFrame frame : frames) {
      String type = frame.getMethod().getType().getName().replaceFirst("^linkworthy\\.", "");
      String stage = stageOfPlace.get(type + "." + frame.getMethod().getName());
      stage = stage == null ? stageOfPlace.get(type) : stage;
      if (stage != null) {
        return stage;
      }
    }
    return "";
  }
}
