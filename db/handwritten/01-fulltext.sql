ALTER TABLE `families` ADD FULLTEXT INDEX IF NOT EXISTS `families_search` (`search_text`);
--> statement-breakpoint
ALTER TABLE `families` ADD FULLTEXT INDEX IF NOT EXISTS `families_title_search` (`title`);
