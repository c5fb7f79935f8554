package org.sweeptally.stream;

import org.sweeptally.event.LogEntry;
import org.sweeptally.event.SettingsBody;
import org.sweeptally.region.LocalSite;
import org.sweeptally.region.RegionMachine;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.EffectiveSettings;
import org.sweeptally.site.Site;

/** One revision of a site's settings, as an entry of its log. */
record Revision(LogEntry entry, SettingsBody body, Site site) {

    /** The revision that a site file holds, written for this program's machine. */
    static Revision of(Site site) {
        SettingsBody body =
                new SettingsBody(EffectiveSettings.text(site), site.revision(), RegionMachine.MACHINE_VERSION);
        Long from = site.fromMicros().isPresent() ? site.fromMicros().getAsLong() : null;
        return new Revision(OperatorEntries.settings(from, body), body, site);
    }

    /**
     * A revision as it stands in the settings topic.
     *
     * @throws OperatorStoppedException if it is none of ours, or was written for a newer machine
     */
    static Revision read(String topic, byte[] value) {
        LogEntry entry;
        try {
            entry = Wire.decode(value, LogEntry.class);
        } catch (IllegalArgumentException e) {
            throw new OperatorStoppedException(
                    "topic " + topic + " holds a record that is no settings: " + e.getMessage(), e);
        }
        if (!(entry.getBody() instanceof SettingsBody body)) {
            throw new OperatorStoppedException("topic " + topic + " holds an entry that is no settings");
        }
        if (body.getMachineVersion() > RegionMachine.MACHINE_VERSION) {
            throw new OperatorStoppedException("topic " + topic + " holds settings, revision " + body.getRevision()
                    + ", that were written for machine version " + body.getMachineVersion()
                    + ", and this program has machine version " + RegionMachine.MACHINE_VERSION
                    + ": start a newer program");
        }
        return new Revision(entry, body, LocalSite.readSettings(body.getText()));
    }

    int number() {
        return body.getRevision();
    }

    /** Its key in the settings topic: compaction keeps every revision. */
    byte[] key() {
        return RegionPartitions.key(site.name() + "/" + number());
    }

    boolean hasTextOf(Revision other) {
        return body.getText().equals(other.body.getText());
    }
}
