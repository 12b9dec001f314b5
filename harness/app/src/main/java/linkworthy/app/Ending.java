package linkworthy.app;

import java.io.PrintWriter;
import linkworthy.results.ResultsFolder;

/** What is printed at the end of a run. */
enum Ending {
  /** The answer, the table and where the report is. */
  TEXT {
    @Override
    void print(ResultsFolder results, PrintWriter out) {
      Reports.answer(results).forEach(out::println);
      Reports.widths(results).ifPresent(out::println);
      out.println();
      SummaryTable.of(results.cells()).forEach(out::println);
      out.println("report: " + results.path().resolve(ResultsFolder.REPORT));
    }
  },

  /** One document for scripts. */
  JSON {
    @Override
    void print(ResultsFolder results, PrintWriter out) {
      out.print(SummaryJson.of(results));
      out.flush();
    }
  },

  NOTHING {
    @Override
    void print(ResultsFolder results, PrintWriter out) {}
  };

  abstract void print(ResultsFolder results, PrintWriter out);
}
