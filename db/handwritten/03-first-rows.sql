INSERT IGNORE INTO `index_head` (`name`, `seq`) VALUES ('index', 0);
