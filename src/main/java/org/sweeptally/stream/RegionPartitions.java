package org.sweeptally.stream;

import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Collection;
import java.util.Collections;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import org.apache.kafka.streams.processor.StreamPartitioner;

/**
 * Which partition a region's records go to: its place in the order of the site's regions by name, counted round and
 * round through the partitions. Keys are the region's name, or the region's name, a slash and an object.
 */
public final class RegionPartitions implements StreamPartitioner<byte[], byte[]> {

    private static final byte SLASH = '/';

    private final List<String> regions;

    public RegionPartitions(Collection<String> regions) {
        this.regions = regions.stream().sorted().toList();
    }

    /** All regions, by name. */
    List<String> regions() {
        return regions;
    }

    /**
     * The partition of a region.
     *
     * @throws IllegalArgumentException if the site has no such region
     */
    public int partition(String region, int partitions) {
        int place = Collections.binarySearch(regions, region);
        if (place < 0) {
            throw new IllegalArgumentException("the site has no region " + region + ", its regions are " + regions);
        }
        return Math.floorMod(place, partitions);
    }

    /** The regions of a partition, by name. */
    List<String> regionsOf(int partition, int partitions) {
        List<String> found = new ArrayList<>();
        for (String region : regions) {
            if (partition(region, partitions) == partition) {
                found.add(region);
            }
        }
        return found;
    }

    public static byte[] key(String region) {
        return region.getBytes(StandardCharsets.UTF_8);
    }

    /** The region that a key begins with. */
    public static String region(byte[] key) {
        int length = 0;
        while (length < key.length && key[length] != SLASH) {
            length++;
        }
        return new String(key, 0, length, StandardCharsets.UTF_8);
    }

    /** Records without a key, of parts that were rejected before any region heard them, go to the first partition. */
    @Override
    public Optional<Set<Integer>> partitions(String topic, byte[] key, byte[] value, int partitions) {
        return Optional.of(Set.of(key == null ? 0 : partition(region(key), partitions)));
    }
}
