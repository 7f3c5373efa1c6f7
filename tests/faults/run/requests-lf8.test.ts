import { describeRequestSweep } from "./request-sweep";

describeRequestSweep("lf8", [1, 3, 4], 100);
