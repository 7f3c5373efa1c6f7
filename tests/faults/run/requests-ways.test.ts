import { describeRequestSweep } from "./request-sweep";

// The raster that is out changes in many writes: meanwhile another slot is on, or nothing is put out.
describeRequestSweep("brackenrow", [3, 5, 7], 100, 3);
describeRequestSweep("brackenrow", [3, 5, 7], 100, 5);
