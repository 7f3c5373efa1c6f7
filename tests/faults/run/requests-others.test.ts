import { describeRequestSweep } from "./request-sweep";

// The least numbers of cases count up over the file.
describeRequestSweep("brackenrow", [7, 17, 23], 350);
// The raster that is out changes in many writes: meanwhile another slot is on, or nothing is put out.
describeRequestSweep("brackenrow", [31, 53, 71], 595, 3);
describeRequestSweep("brackenrow", [31, 53, 71], 840, 5);
describeRequestSweep("ternwick", [7, 17, 23], 1085);
