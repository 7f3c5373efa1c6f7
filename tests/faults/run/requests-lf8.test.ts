import { describeRequestSweep } from "./request-sweep";

describeRequestSweep("lf8", [7, 17, 23], 390);
