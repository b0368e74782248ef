-- Slices are columns of whole numbers that hardly pack, and a ranking reads months of them at once: they lie as they are.
ALTER TABLE "screen_days" ALTER COLUMN "payload" SET STORAGE EXTERNAL;
