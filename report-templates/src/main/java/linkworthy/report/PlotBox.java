package linkworthy.report;

/** The frame that a plot is drawn in: the coordinates of its sides. */
record PlotBox(int left, int right, int top, int bottom) {}
