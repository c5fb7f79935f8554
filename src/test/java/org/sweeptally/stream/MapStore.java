package org.sweeptally.stream;

import java.util.ArrayList;
import java.util.Iterator;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import org.apache.kafka.common.utils.Bytes;
import org.apache.kafka.streams.KeyValue;
import org.apache.kafka.streams.processor.StateStore;
import org.apache.kafka.streams.processor.StateStoreContext;
import org.apache.kafka.streams.query.Position;
import org.apache.kafka.streams.state.KeyValueBytesStoreSupplier;
import org.apache.kafka.streams.state.KeyValueIterator;
import org.apache.kafka.streams.state.KeyValueStore;

/** A store over a map that outlives the topology, as a changelog would. */
final class MapStore implements KeyValueStore<Bytes, byte[]> {

    private final String name;
    private final TreeMap<Bytes, byte[]> map;
    private boolean open;

    private MapStore(String name, TreeMap<Bytes, byte[]> map) {
        this.name = name;
        this.map = map;
    }

    static KeyValueBytesStoreSupplier over(String name, TreeMap<Bytes, byte[]> map) {
        return new KeyValueBytesStoreSupplier() {
            @Override
            public String name() {
                return name;
            }

            @Override
            public KeyValueStore<Bytes, byte[]> get() {
                return new MapStore(name, map);
            }

            @Override
            public String metricsScope() {
                return "map";
            }
        };
    }

    @Override
    public String name() {
        return name;
    }

    @Override
    public void init(StateStoreContext context, StateStore root) {
        context.register(root, (key, value) -> put(Bytes.wrap(key), value));
        open = true;
    }

    @Override
    public void put(Bytes key, byte[] value) {
        if (value == null) {
            map.remove(key);
        } else {
            map.put(key, value);
        }
    }

    @Override
    public byte[] putIfAbsent(Bytes key, byte[] value) {
        return map.putIfAbsent(key, value);
    }

    @Override
    public void putAll(List<KeyValue<Bytes, byte[]>> entries) {
        entries.forEach(entry -> put(entry.key, entry.value));
    }

    @Override
    public byte[] delete(Bytes key) {
        return map.remove(key);
    }

    @Override
    public byte[] get(Bytes key) {
        return map.get(key);
    }

    @Override
    public KeyValueIterator<Bytes, byte[]> range(Bytes from, Bytes to) {
        return over(map.subMap(from, true, to, true));
    }

    @Override
    public KeyValueIterator<Bytes, byte[]> all() {
        return over(map);
    }

    private static KeyValueIterator<Bytes, byte[]> over(Map<Bytes, byte[]> entries) {
        Iterator<Map.Entry<Bytes, byte[]>> copy = new ArrayList<>(entries.entrySet()).iterator();
        return new KeyValueIterator<>() {
            @Override
            public void close() {}

            @Override
            public Bytes peekNextKey() {
                throw new UnsupportedOperationException();
            }

            @Override
            public boolean hasNext() {
                return copy.hasNext();
            }

            @Override
            public KeyValue<Bytes, byte[]> next() {
                Map.Entry<Bytes, byte[]> next = copy.next();
                return KeyValue.pair(next.getKey(), next.getValue());
            }
        };
    }

    @Override
    public long approximateNumEntries() {
        return map.size();
    }

    @Override
    public Position getPosition() {
        return Position.emptyPosition();
    }

    @Override
    public void close() {
        open = false;
    }

    @Override
    public boolean persistent() {
        return false;
    }

    @Override
    public boolean isOpen() {
        return open;
    }
}
