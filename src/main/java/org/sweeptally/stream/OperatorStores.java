package org.sweeptally.stream;

import org.apache.kafka.streams.state.KeyValueBytesStoreSupplier;
import org.apache.kafka.streams.state.Stores;

/** What holds the bytes of the operator's stores. */
record OperatorStores(KeyValueBytesStoreSupplier snapshots, KeyValueBytesStoreSupplier progress) {

    /**
     * On disk. The bus's changelogs are what counts; but a process with a store on disk keeps its name across a
     * restart, and so ends its own old transaction at once.
     */
    static OperatorStores onDisk() {
        return new OperatorStores(
                Stores.persistentKeyValueStore(RegionProcessor.SNAPSHOTS),
                Stores.persistentKeyValueStore(RegionProcessor.PROGRESS));
    }
}
