import { describeRequestSweep } from "./request-sweep";

// The least numbers of cases count up over the file.
describeRequestSweep("brackenrow", [5, 13, 17], 410);
// The raster that is out changes in many writes: meanwhile another slot is on, or nothing is put out.
describeRequestSweep("brackenrow", [23, 41, 53], 680, 3);
describeRequestSweep("brackenrow", [23, 41, 53], 940, 5);
describeRequestSweep("ternwick", [5, 13, 17], 1230);
