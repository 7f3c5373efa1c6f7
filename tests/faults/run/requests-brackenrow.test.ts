import { describeRequestSweep } from "./request-sweep";

describeRequestSweep("brackenrow", [1, 2, 2], 100);
