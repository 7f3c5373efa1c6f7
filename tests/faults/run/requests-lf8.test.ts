import { describeRequestSweep } from "./request-sweep";

describeRequestSweep("lf8", [11, 29, 37], 320);
