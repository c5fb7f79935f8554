package org.sweeptally.bench;

import java.util.Map;
import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.locks.LockSupport;
import org.apache.kafka.clients.producer.KafkaProducer;
import org.apache.kafka.clients.producer.ProducerRecord;
import org.sweeptally.event.Part;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.SensorSettings;
import org.sweeptally.site.Site;
import org.sweeptally.stream.BenchBus;

/** Sensors that by turns send a closing part at a steady pace until closed, in real time; keeps when each was sent. */
final class LiveSensor implements AutoCloseable {

    private static final byte[] KEY = {'n'};

    private final Map<Long, Long> sentNanos = new ConcurrentHashMap<>();
    private final Thread thread;
    private volatile boolean closing;

    LiveSensor(Site site, int detections, long intervalMillis) {
        thread = new Thread(() -> send(site, detections, intervalMillis), "live-sensor");
        thread.start();
    }

    private void send(Site site, int detections, long intervalMillis) {
        var settings = BenchBus.clients().producer("live-sensor");
        settings.put("linger.ms", "0");
        BenchScans scans = new BenchScans(detections, site.sensors().stream().map(SensorSettings::name).toList(), 1);
        try (KafkaProducer<byte[], byte[]> producer = new KafkaProducer<>(settings)) {
            long next = System.nanoTime();
            while (!closing) {
                long scanTimeMicros = System.currentTimeMillis() * 1000;
                Part part = scans.next(scanTimeMicros, intervalMillis / 1000.0);
                sentNanos.put(scanTimeMicros, System.nanoTime());
                producer.send(new ProducerRecord<>(BenchBus.names(site).detections(), KEY, Wire.encode(part)));
                next += intervalMillis * 1_000_000;
                LockSupport.parkNanos(next - System.nanoTime());
            }
        }
    }

    /** When each scan was handed to the bus, by its time. */
    Map<Long, Long> sentNanos() {
        return sentNanos;
    }

    @Override
    public void close() throws InterruptedException {
        closing = true;
        thread.join();
    }
}
