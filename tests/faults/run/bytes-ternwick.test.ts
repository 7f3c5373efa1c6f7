import { describeByteSweep } from "./byte-sweep";

describeByteSweep("ternwick", { backup: { once: 9, lasting: 37 }, run: { once: 101, lasting: 271 }, "put-back": { once: 53, lasting: 181 } }, 1075);
