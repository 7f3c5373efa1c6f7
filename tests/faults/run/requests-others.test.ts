import { describeRequestSweep } from "./request-sweep";

// The least numbers of cases count up over the file.
describeRequestSweep("brackenrow", [1, 3, 3], 1400);
// The raster that is out changes in many writes: meanwhile another slot is on, or nothing is put out.
describeRequestSweep("brackenrow", [6, 9, 13], 1800, 3);
describeRequestSweep("brackenrow", [6, 9, 13], 2200, 5);
describeRequestSweep("ternwick", [1, 3, 3], 3200);
