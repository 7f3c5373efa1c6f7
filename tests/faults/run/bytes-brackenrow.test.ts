import { describeByteSweep } from "./byte-sweep";

describeByteSweep("brackenrow", { backup: { once: 7, lasting: 41 }, run: { once: 101, lasting: 271 }, "put-back": { once: 53, lasting: 181 } }, 970);
