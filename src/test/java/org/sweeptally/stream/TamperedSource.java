package org.sweeptally.stream;

import java.util.ArrayDeque;
import java.util.Deque;
import java.util.List;
import java.util.Optional;
import java.util.function.Function;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.replay.LogCursor;
import org.sweeptally.replay.RecordCursor;
import org.sweeptally.replay.RecordKind;
import org.sweeptally.replay.RecordedSource;

/** A source whose n-th record of one kind somebody has changed, taken out or put in twice. */
record TamperedSource(
        RecordedSource honest, RecordKind kind, int nth, Function<byte[], List<byte[]>> change)
        implements RecordedSource {

    @Override
    public RecordCursor records(RecordKind asked, String region, Beginning beginning, long fromMicros) {
        RecordCursor cursor = honest.records(asked, region, beginning, fromMicros);
        return asked == kind ? new Tampered(cursor, nth, change) : cursor;
    }

    private static final class Tampered implements RecordCursor {

        private final RecordCursor cursor;
        private final Deque<Recorded> ahead = new ArrayDeque<>();
        private int left;
        private final Function<byte[], List<byte[]>> change;

        Tampered(RecordCursor cursor, int nth, Function<byte[], List<byte[]>> change) {
            this.cursor = cursor;
            this.left = nth;
            this.change = change;
        }

        @Override
        public Recorded next() {
            if (!ahead.isEmpty()) {
                return ahead.remove();
            }
            Recorded next = cursor.next();
            if (next != null && --left == 0) {
                change.apply(next.value()).forEach(value -> ahead.add(new Recorded(value, next.where())));
                return next();
            }
            return next;
        }

        @Override
        public void close() {
            cursor.close();
        }
    }

    @Override
    public String site() {
        return honest.site();
    }

    @Override
    public List<String> regions() {
        return honest.regions();
    }

    @Override
    public List<SettingsBody> settings() {
        return honest.settings();
    }

    @Override
    public Beginning before(String region, long micros) {
        return honest.before(region, micros);
    }

    @Override
    public LogCursor log(String region, Beginning beginning) {
        return honest.log(region, beginning);
    }

    @Override
    public void close() {
        honest.close();
    }
}
