import { describeRequestSweep } from "./request-sweep";

describeRequestSweep("ternwick", [1, 2, 2], 100);
