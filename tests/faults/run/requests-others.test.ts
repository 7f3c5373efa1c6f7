import { describeRequestSweep } from "./request-sweep";

// The least numbers of cases count up over the file.
describeRequestSweep("brackenrow", [2, 6, 7], 620);
// The raster that is out changes in many writes: meanwhile another slot is on, or nothing is put out.
describeRequestSweep("brackenrow", [12, 19, 27], 800, 3);
describeRequestSweep("brackenrow", [12, 19, 27], 980, 5);
describeRequestSweep("ternwick", [2, 6, 7], 1420);
