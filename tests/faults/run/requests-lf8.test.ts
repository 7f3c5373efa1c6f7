import { describeRequestSweep } from "./request-sweep";

describeRequestSweep("lf8", [3, 8, 11], 550);
