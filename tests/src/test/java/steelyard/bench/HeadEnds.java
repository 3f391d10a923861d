package steelyard.bench;

import io.netty.buffer.ByteBuf;
import io.netty.util.ByteProcessor;

/** Finds the empty lines that end heads, over any number of reads. */
final class HeadEnds implements ByteProcessor {
    private int matched;

    @Override
    public boolean process(byte octet) {
        if (octet == '\r') {
            matched = matched == 2 ? 3 : 1;
        } else if (octet == '\n' && (matched == 1 || matched == 3)) {
            matched++;
        } else {
            matched = 0;
        }
        return matched != 4;
    }

    /** Reads up to the next end of a head. @return whether there was one */
    boolean skipHead(ByteBuf buffer) {
        int last = buffer.forEachByte(this);
        if (last < 0) {
            buffer.skipBytes(buffer.readableBytes());
            return false;
        }
        matched = 0;
        buffer.readerIndex(last + 1);
        return true;
    }
}
